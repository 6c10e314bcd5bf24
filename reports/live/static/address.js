// The whole state in the address, after the #, which a browser never sends anywhere.
async function through(stream, bytes) {
  const piped = new Blob([bytes]).stream().pipeThrough(stream);
  return new Uint8Array(await new Response(piped).arrayBuffer());
}

let turn = 0;

export async function writeAddress(state) {
  const own = ++turn;
  const bytes = await through(new CompressionStream("deflate-raw"), new TextEncoder().encode(JSON.stringify(state)));
  let text = "";
  for (const byte of bytes) text += String.fromCharCode(byte);
  const packed = btoa(text).replaceAll("+", "-").replaceAll("/", "_").replaceAll("=", "");
  if (own === turn) history.replaceState(null, "", `#${packed}`);
}

const isTable = (value) => typeof value === "object" && value !== null && !Array.isArray(value);

export async function readAddress() {
  const packed = location.hash.slice(1);
  if (!packed) return null;
  try {
    const text = atob(packed.replaceAll("-", "+").replaceAll("_", "/"));
    const bytes = await through(new DecompressionStream("deflate-raw"), Uint8Array.from(text, (c) => c.charCodeAt(0)));
    const state = JSON.parse(new TextDecoder().decode(bytes));
    const variants = Array.isArray(state.variants) ? state.variants : [];
    if (!isTable(state.document) || !isTable(state.opened)) return null;
    return {
      ...state,
      variants: variants.filter((own) => isTable(own) && isTable(own.document) && typeof own.name === "string"),
    };
  } catch {
    return null;
  }
}
