// Talking to the server: one request of a kind under way, only the newest change waits behind it.
const token = new URLSearchParams(location.search).get("token") ?? "";
const page = crypto.randomUUID();

export async function get(path) {
  const got = await fetch(path, { headers: { "X-Faying-Token": token, "X-Faying-Page": page } });
  if (!got.ok) throw new Error((await got.text()).trim());
  return got.json();
}

export async function ask(task, request, part = "") {
  const got = await fetch(`/ask/${task}`, {
    method: "POST",
    headers: { "Content-Type": "application/json", "X-Faying-Token": token, "X-Faying-Page": page + part },
    body: JSON.stringify(request),
  });
  if (!got.ok) throw new Error((await got.text()).trim());
  return got.json();
}

export const reportAddress = (name) => `/report?${new URLSearchParams({ name, token })}`;

// Returns a function that asks; calls that come while one is under way are replaced by the newest.
export function newest(task, then, failed) {
  let busy = false, waiting = null;
  async function run(request, note) {
    busy = true;
    try {
      const found = await ask(task, request);
      if (found.failed) throw new Error(found.failed);
      then(found, note);
    } catch (error) {
      if (!waiting) failed(error);
    }
    busy = false;
    if (waiting) { const next = waiting; waiting = null; run(...next); }
  }
  return (request, note) => { if (busy) waiting = [request, note]; else run(request, note); };
}
