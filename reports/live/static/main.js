// The page: one case that changes, its answer, and the variants kept beside it.
import { readAddress, writeAddress } from "./address.js";
import { drawFit, drawMakeup } from "./charts.js";
import { buildFields, nameKey, showFaults, valueAt } from "./fields.js";
import { drawRows, drawToml, placeWords } from "./rows.js";
import { drawSection } from "./section.js";
import { element } from "./svg.js";
import { ask, get, newest, reportAddress } from "./talk.js";
import { drawVariants, summary } from "./variants.js";

const MOST_VARIANTS = 8, MOST_UNDO = 200;
const at = (id) => document.getElementById(id);
const state = { document: {}, opened: {}, variants: [], chosen: "", name: "variant 1" };
const past = [], future = [];
let form, good = null, curves = null, before = new Map(), openedText = "", lastEdit = ["", 0], drawn = 0;

const send = newest("answer", show, failed);
const sendFits = newest("fits", (found) => { curves = found.lines.length ? found : curves; at("fit").classList.remove("waiting"); drawCurves(); }, () => {});
let fitsTimer = 0, addressTimer = 0;

function say(words, more) {
  at("message").replaceChildren(words, ...(more ? [" ", more] : []));
}

function failed(error) {
  at("live").classList.add("old");
  at("state").textContent = error instanceof TypeError ? "The server has ended: start `faying try` again." : error.message;
}

// Every change goes through here: what can be undone, the address, the question to the engine.
function changed(asked = performance.now()) {
  at("undo").disabled = !past.length;
  at("redo").disabled = !future.length;
  clearTimeout(addressTimer);
  addressTimer = setTimeout(() => writeAddress({ ...state, variants: state.variants.map(({ name, document }) => ({ name, document })) }), 250);
  send({ document: state.document }, asked);
  clearTimeout(fitsTimer);
  at("fit").classList.add("waiting");
  fitsTimer = setTimeout(() => sendFits({ document: state.document }), 300);
}

function change(path, value, structural = false) {
  const now = performance.now(), key = nameKey(path);
  // one drag of one field is one step to undo
  if (structural || key !== lastEdit[0] || now - lastEdit[1] > 1000) past.push(JSON.stringify(state.document));
  if (past.length > MOST_UNDO) past.shift();
  future.length = 0;
  lastEdit = [structural ? "" : key, now];
  valueAt(state.document, path.slice(0, -1))[path.at(-1)] = value;
  if (structural) rebuild(key);
  changed(now);
}

function rebuild(focusKey) {
  buildFields(at("fields"), state.document, form, change);
  const place = focusKey && [...at("fields").querySelectorAll("[data-where]")].find((own) => own.dataset.where === focusKey);
  place?.querySelector("input, select")?.focus();
}

function step(from, to) {
  if (!from.length) return;
  to.push(JSON.stringify(state.document));
  state.document = JSON.parse(from.pop());
  lastEdit = ["", 0];
  rebuild();
  changed();
}

function show(found, asked) {
  drawToml(at("toml"), found.toml, openedText);
  const faults = found.faults ?? [];
  showFaults(at("fields"), faults);
  at("live").classList.toggle("old", faults.length > 0);
  at("state").textContent = faults.length
    ? `${faults.length === 1 ? "One thing is" : `${faults.length} things are`} not possible: ${faults[0].where}: ${faults[0].problem} ${good ? "Dimmed below is the last good answer." : ""}` : "";
  if (!faults.length) {
    before = new Map((good?.rows ?? []).map((line) => [`${line.row}|${line.sheet}`, line.rank]));
    good = found;
    draw();
  }
  requestAnimationFrame(() => {
    document.body.dataset.took = (performance.now() - asked).toFixed(1);
    document.body.dataset.drawn = ++drawn;
  });
}

function draw() {
  if (!good) return;
  at("title").textContent = good.title || "faying try";
  document.title = `${good.title} - faying try`;
  const places = good.rows.map((line) => `${line.row}|${line.sheet}`);
  const chosen = places.includes(state.chosen) ? state.chosen : places[0];
  drawSection(at("section"), good, chosen, choose);
  at("answer").textContent = good.sentences.join(" ");
  at("loads").textContent = [`Loads: ${good.loads.name}, ${good.loads.cycles.toPrecision(4)} cycles a flight, up to ${good.loads.largest.toFixed(0)} MPa.`, ...good.loads.notes].join(" ");
  drawRows(at("rows"), good, chosen, choose, before);
  const line = good.rows[places.indexOf(chosen)];
  drawMakeup(at("makeup"), line, good.route);
  at("h-makeup").textContent = `Stress make-up: row ${line.row}, ${line.sheet}`;
  at("place").textContent = placeWords(line);
  drawCurves();
}

function drawCurves() {
  if (good && curves) drawFit(at("fit"), curves, good);
}

function choose(place) {
  state.chosen = place;
  before = new Map();
  draw();
}

function showVariants() {
  drawVariants(at("variants"), state.variants, {
    rename: (i, name) => { state.variants[i].name = name; changed(); },
    drop: (i) => { state.variants.splice(i, 1); showVariants(); changed(); },
    take: (i) => {
      past.push(JSON.stringify(state.document));
      future.length = 0;
      state.document = structuredClone(state.variants[i].document);
      at("name").value = state.name = state.variants[i].name;
      rebuild();
      changed();
    },
  });
}

let answering = false;

// One after another: a second request of one name would replace the first.
async function answerVariants() {
  if (answering) return;
  answering = true;
  for (let own; (own = state.variants.find((each) => each.summary === undefined)); ) {
    own.summary = await ask("answer", { document: own.document }, " kept").then(summary, () => ({ row: "no answer" }));
    showVariants();
  }
  answering = false;
}

function keep() {
  if (state.variants.length >= MOST_VARIANTS) { say(`${MOST_VARIANTS} variants are kept; drop one first.`); return; }
  state.variants.push({ name: at("name").value, document: structuredClone(state.document) });
  say(`Kept as ${at("name").value}.`);
  at("name").value = state.name = `variant ${state.variants.length + 1}`;
  showVariants();
  answerVariants();
  changed();
}

async function write(task, replace = false) {
  const name = at("name").value;
  say(task === "report" ? "Writing the report ..." : "Saving ...");
  try {
    const found = await ask(task, { document: state.document, name, replace });
    if (found.saved) say(`Saved as ${found.saved}.`);
    else if (found.folder) {
      const link = element("a", { href: reportAddress(name), target: "_blank", rel: "noopener" }, "Open it");
      say(`Report written to "${found.folder}": ${found.files.length} files.`, link);
    } else if (found.exists) {
      const again = element("button", { type: "button", id: "replace" }, "Replace it");
      again.addEventListener("click", () => write("save", true));
      say(`There is a ${found.exists} already.`, again);
    } else say(found.failed ?? found.faults.map((fault) => `${fault.where}: ${fault.problem} ${fault.remedy}`).join(" "));
  } catch (error) {
    say(error.message);
  }
}

async function open(choice) {
  try {
    const { document: tables } = await get(`/open?${new URLSearchParams([choice.split(/:(.*)/s).slice(0, 2)])}`);
    past.push(JSON.stringify(state.document));
    future.length = 0;
    good = curves = null;
    await begin(tables, structuredClone(tables));
    say(`Opened ${choice.split(/:(.*)/s)[1]}.`);
  } catch (error) {
    say(error.message);
  }
}

async function begin(tables, opened) {
  Object.assign(state, { document: tables, opened });
  rebuild();
  openedText = (await ask("answer", { document: opened }, " opened")).toml;
  changed();
  showVariants();
}

async function start() {
  const given = await get("/start");
  form = given.form;
  for (const [words, kind, names] of [["shipped, invented", "demo", given.demos], ["in this folder", "case", given.cases]])
    if (names.length) at("open").append(element("optgroup", { label: words }, ...names.map((name) => element("option", { value: `${kind}:${name}` }, name))));
  const kept = await readAddress();
  if (kept) {
    Object.assign(state, { variants: kept.variants.slice(0, MOST_VARIANTS), chosen: String(kept.chosen ?? ""), name: String(kept.name ?? "variant 1") });
    at("name").value = state.name;
  }
  await begin(kept?.document ?? given.document, kept?.opened ?? structuredClone(given.document));
  answerVariants();
}

at("open").addEventListener("change", () => { const choice = at("open").value; at("open").value = ""; if (choice) open(choice); });
at("undo").addEventListener("click", () => step(past, future));
at("redo").addEventListener("click", () => step(future, past));
at("keep").addEventListener("click", keep);
at("save").addEventListener("click", () => write("save"));
at("report").addEventListener("click", () => write("report"));
at("name").addEventListener("input", () => { state.name = at("name").value; });
at("fields").addEventListener("submit", (event) => event.preventDefault());
document.addEventListener("keydown", (event) => {
  // within a text being written, the browser's own undo is meant
  if (!(event.ctrlKey || event.metaKey) || event.key.toLowerCase() !== "z" || event.target.type === "text") return;
  event.preventDefault();
  if (event.shiftKey) step(future, past); else step(past, future);
});
let width = innerWidth;
addEventListener("resize", () => { if (innerWidth !== width) { width = innerWidth; draw(); } });
start().catch((error) => { at("state").textContent = error.message; });
