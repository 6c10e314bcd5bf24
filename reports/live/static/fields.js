// The case's own keys as fields; a message stands beside the field that caused it.
import { element } from "./svg.js";

const ORDER = ["title", "loads", "splice", "sheet", "row", "hole", "material", "fastener", "life", "inspection"];
const SI = { in_per_lbf: "mm_per_N", ksi_per_psi: "MPa_per_kPa", in: "mm", ksi: "MPa", lbf: "N", psi: "kPa" };
const SLIDERS = { fit_percent: [-0.5, 1], cold_expansion_percent: [0, 6], squeeze_ratio: [1.2, 2] };

const isTable = (value) => typeof value === "object" && value !== null && !Array.isArray(value);
export const nameKey = (path) => path.map((part) => (typeof part === "number" ? `[${part + 1}]` : `.${part}`)).join("").slice(1);
const plainWhere = (where) => where.replace(/\] "[^"]*"/g, "]");

export function valueAt(document, path) {
  return path.reduce((value, part) => value?.[part], document);
}

// The reader's key that a key of the file means: the same, or the one in the other unit.
function specOf(keys, key) {
  if (keys[key]) return [keys[key], true];
  for (const [inch, si] of Object.entries(SI))
    if (key.endsWith(`_${inch}`)) return [keys[key.slice(0, -inch.length) + si] ?? { kind: "number" }, false];
  return [{ kind: "other" }, true];
}

// Names of the case itself or of the library, for the keys that name something.
function names(document, form, table, key) {
  const own = (part) => Object.keys(isTable(document[part]) ? document[part] : {});
  const of = (part) => (Array.isArray(document[part]) ? document[part] : []).map((item) => item?.name).filter((name) => typeof name === "string");
  if (key === "material") return [...own("material"), ...form.names.material];
  if (key === "fastener") return [...own("fastener"), ...form.names.fastener];
  if (key === "hole" && table === "row") return own("hole");
  if (key === "spectrum") return form.names.spectrum;
  if (key === "curve" && table === "material") return form.names.curve;
  if (key === "sheet" || key === "driven_head") return of("sheet");
  if (["after_row", "from_row", "to_row"].includes(key)) return of("row");
  return null;
}

// change(path, value, structural) is called for every edit.
export function buildFields(place, document, form, change) {
  const opened = place.scrollTop;
  const parts = [];
  const keys = [...ORDER.filter((key) => key in document), ...Object.keys(document).filter((key) => !ORDER.includes(key))];
  for (const key of keys) {
    const value = document[key];
    if (form.listed.includes(key) && Array.isArray(value)) {
      value.forEach((item, i) => isTable(item) && parts.push(group([key, i], item, form.tables[key], `${key} ${i + 1}`)));
    } else if (form.named.includes(key) && isTable(value)) {
      for (const [name, item] of Object.entries(value)) if (isTable(item)) parts.push(group([key, name], item, form.tables[key], `${key} ${name}`));
    } else if (isTable(value) && form.tables[key]) {
      parts.push(group([key], value, form.tables[key], key));
    } else if (key === "title") {
      const own = element("fieldset", { "data-where": "title" }, element("legend", {}, "title"));
      own.append(field(["title"], value, { kind: "text", required: true }, true));
      parts.push(own);
    }
  }
  const rest = element("div", { "data-where": "", className: "rest" });
  place.replaceChildren(rest, ...parts);
  place.scrollTop = opened;

  function group(path, table, keys, words) {
    const made = element("fieldset", { "data-where": nameKey(path) }, element("legend", {}, words));
    made.append(...lines(path, table, keys));
    const given = new Set(Object.keys(table));
    const free = Object.keys(keys).filter((key) => !given.has(key) && !["table", "list", "other"].includes(keys[key].kind));
    const more = element("div", { className: "more" });
    if (free.length) {
      const pick = element("select", { "aria-label": `Add a key to ${words}` }, element("option", { value: "" }, "add a key ..."));
      pick.append(...free.map((key) => element("option", { value: key }, key)));
      pick.addEventListener("change", () => pick.value && change([...path, pick.value], starting(path[0], pick.value, keys[pick.value]), true));
      more.append(pick);
    }
    if (path[0] === "row") {
      more.append(button(`Copy ${words}`, () => change(["row"], copied(document.row, path[1]), true)));
      if (document.row.length > 1) more.append(button(`Remove ${words}`, () => change(["row"], document.row.filter((_, i) => i !== path[1]), true)));
    }
    if (more.childNodes.length) made.append(more);
    return made;
  }

  function lines(path, table, keys) {
    return Object.entries(table).flatMap(([key, value]) => {
      const [spec, exact] = specOf(keys, key), own = [...path, key];
      if (isTable(value)) return lines(own, value, spec.keys ?? {});
      if (Array.isArray(value)) return value.flatMap((item, i) => (isTable(item) ? lines([...own, i], item, spec.keys ?? {}) : []));
      return [field(own, value, spec, exact)];
    });
  }

  function field(path, value, spec, exact) {
    const where = nameKey(path), key = path.at(-1);
    const within = form.listed.includes(path[0]) || form.named.includes(path[0]) ? 2 : form.tables[path[0]] ? 1 : 0;
    const id = `f-${where.replace(/[^A-Za-z0-9]+/g, "-")}`;
    const made = element("div", { className: "field", "data-where": where });
    const parts = (nameKey(path.slice(within)) || key).split(/(?<=[_.])/); // may break there, and nowhere else
    const label = element("label", { htmlFor: id }, ...parts.flatMap((part) => [part, element("wbr")]));
    const choices = spec.choices ?? names(document, form, path[0], key);
    let input;
    if (choices) {
      input = element("select", { id }, ...[...new Set([...choices, String(value)])].map((name) => element("option", { value: name, selected: name === value }, name)));
      input.addEventListener("change", () => change(path, input.value, ["hole", "sheet"].includes(path[0])));
    } else if (typeof value === "boolean" || spec.kind === "switch") {
      input = element("input", { id, type: "checkbox", checked: value === true });
      input.addEventListener("change", () => change(path, input.checked));
    } else if (typeof value === "number" || ["number", "whole"].includes(spec.kind)) {
      input = element("input", { id, type: "number", step: "any", value: String(value) });
      made.append(label, input);
      const slider = spec.kind === "number" && typeof value === "number" ? sliderOf(key, value, spec, exact, where) : null;
      const take = (number, from) => {
        if (number === "" || !Number.isFinite(Number(number))) { say(made, input, "Give a number."); return; }
        if (slider && from !== slider) slider.value = number;
        if (from !== input) input.value = number;
        change(path, Number(number));
      };
      input.addEventListener("input", () => take(input.value, input));
      if (slider) { slider.addEventListener("input", () => take(slider.value, slider)); made.append(slider); }
    } else {
      if (key === "title") made.classList.add("broad");
      input = element("input", { id, type: "text", value: String(value), spellcheck: false });
      input.addEventListener("input", () => change(path, input.value));
      // others name it: their choices follow once it is written
      if (key === "name") input.addEventListener("change", () => change(path, input.value, true));
    }
    if (!made.childNodes.length) made.append(label, input);
    if (!spec.required && path.length > 1) label.title = "may be left out";
    return made;
  }
}

function sliderOf(key, value, spec, exact, where) {
  let [least, most] = SLIDERS[key] ?? [0.4 * value, 2.5 * value];
  if (value === 0 && !SLIDERS[key]) [least, most] = [0, exact && spec.most <= 1 ? spec.most : 1];
  if (exact && Number.isFinite(spec.most) && spec.most <= 1) [least, most] = [Math.max(spec.least ?? 0, 0), spec.most];
  [least, most] = [Math.min(least, most, value), Math.max(least, most, value)];
  const step = 10 ** Math.floor(Math.log10((most - least) / 100 || 0.01));
  const made = element("input", { type: "range", "aria-label": `${where}, slider`, tabIndex: 0 });
  Object.assign(made, { min: Math.floor(least / step) * step, max: Math.ceil(most / step) * step, step });
  made.setAttribute("step", String(Number(step.toPrecision(1))));
  made.value = value;
  return made;
}

function button(words, then) {
  const made = element("button", { type: "button" }, words);
  made.addEventListener("click", then);
  return made;
}

function starting(table, key, spec) {
  if (spec.default !== undefined) return spec.default;
  if (spec.choices) return spec.choices[0];
  const usual = { fit_percent: 0, squeeze_ratio: 1.5, squeeze_force_N: 20000, at_mm: 0, pitch_mm: 20, edge_mm: 8, row_spacing_mm: 20, to_centre_mm: 15, tests: 1 };
  if (usual[key] !== undefined) return usual[key];
  if (spec.kind === "switch") return false;
  if (spec.kind === "text") return "";
  return spec.least > 0 ? spec.least : 1;
}

function copied(rows, place) {
  const taken = new Set(rows.map((row) => row.name));
  const letters = [..."ABCDEFGHIJKLMNOPQRSTUVWXYZ"];
  const name = letters.find((letter) => !taken.has(letter)) ?? `${rows[place].name} copy`;
  const made = { ...structuredClone(rows[place]), name };
  if (typeof made.at_mm === "number" && place > 0) made.at_mm += made.at_mm - (rows[place - 1].at_mm ?? 0);
  return [...rows.slice(0, place + 1), made, ...rows.slice(place + 1)];
}

function say(made, input, words) {
  const id = `${made.dataset.where}-fault`;
  made.querySelector(".fault")?.remove();
  made.append(element("p", { className: "fault", id }, words));
  input?.setAttribute("aria-invalid", "true");
  input?.setAttribute("aria-describedby", id);
}

// Put each fault beside the field or table it names; what names none stands on top.
export function showFaults(place, faults) {
  for (const old of place.querySelectorAll(".fault")) old.remove();
  for (const old of place.querySelectorAll("[aria-invalid]")) { old.removeAttribute("aria-invalid"); old.removeAttribute("aria-describedby"); }
  const places = [...place.querySelectorAll("[data-where]")];
  for (const fault of faults) {
    const where = plainWhere(fault.where);
    const fits = (own) => own === "" || where === own || where.startsWith(`${own}.`) || where.startsWith(`${own}[`) || where.startsWith(`${own} `);
    const best = places.filter((own) => fits(own.dataset.where)).reduce((a, b) => (b.dataset.where.length >= a.dataset.where.length ? b : a));
    const near = best.matches(".field");
    const words = `${near || !fault.where ? "" : `${fault.where}: `}${fault.problem} ${fault.remedy}`.trim();
    if (near) say(best, best.querySelector("input:not([type=range]), select"), words);
    else best.append(element("p", { className: "fault" }, words));
  }
}
