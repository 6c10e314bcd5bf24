// Variants kept beside the present case: what differs, what it does to the first row.
import { element } from "./svg.js";

const FLAT_NAMES = new Set(["row", "sheet"]);

function flat(value, path = "", found = {}) {
  if (Array.isArray(value)) value.forEach((item, i) => flat(item, `${path}[${FLAT_NAMES.has(path) ? item?.name ?? i + 1 : i + 1}]`, found));
  else if (typeof value === "object" && value !== null) for (const [key, item] of Object.entries(value)) flat(item, path ? `${path}.${key}` : key, found);
  else found[path] = value;
  return found;
}

// Keys in which two cases differ, as the second has them.
export function differences(before, after) {
  const [a, b] = [flat(before), flat(after)];
  const keys = [...new Set([...Object.keys(a), ...Object.keys(b)])].filter((key) => a[key] !== b[key]);
  return keys.map((key) => `${key} = ${key in b ? b[key] : "left out"}`);
}

export function summary(answer) {
  if (answer.faults) return null;
  const line = answer.rows[0];
  return { row: `${line.row}, ${line.sheet}`, ...line.shown, peak: `${line.peak_max_MPa.toFixed(0)} MPa`, life: line.life_flights };
}

const LINES = [
  ["goes first", "row"], ["life [flights]", "life_flights"], ["no credit [flights]", "life_no_credit_flights"],
  ["by practice [flights]", "life_practice_flights"], ["inspect from [flights]", "threshold_flights"],
  ["threshold used", "share_used"], ["peak stress", "peak"],
];

export function drawVariants(table, variants, act) {
  if (!variants.length) {
    table.replaceChildren(element("caption", { className: "quiet" }, "Keep a variant to see it here beside the next."));
    return;
  }
  const best = Math.max(...variants.map((own) => (own.summary ? own.summary.life ?? Infinity : 0)));
  const head = element("tr", {}, element("th", { className: "words", scope: "col" }, "variant"),
    ...variants.map((own, i) => {
      const name = element("input", { value: own.name, maxLength: 60, size: 12, "aria-label": `Name of variant ${i + 1}` });
      name.addEventListener("change", () => act.rename(i, name.value));
      return element("th", { scope: "col" }, name);
    }));
  const lines = LINES.map(([words, key]) => element("tr", {}, element("th", { className: "words", scope: "row" }, words),
    ...variants.map((own) => element("td", {}, (own.summary?.[key] ?? { undefined: "...", null: "has faults" }[own.summary] ?? "") +
      (key === "life_flights" && variants.length > 1 && own.summary && (own.summary.life ?? Infinity) === best ? " (longest)" : "")))));
  const unlike = element("tr", {}, element("th", { className: "words", scope: "row" }, "differs from the first in"),
    ...variants.map((own, i) => {
      const found = differences(variants[0].document, own.document);
      const shown = found.length > 8 ? [...found.slice(0, 8), `and ${found.length - 8} more`] : found;
      return element("td", { className: "words" }, ...(shown.length ? shown.flatMap((text) => [text, element("br")]) : [i ? "nothing" : ""]));
    }));
  const tools = element("tr", {}, element("td"), ...variants.map((own, i) => {
    const back = element("button", { type: "button", "aria-label": `Go on from ${own.name}` }, "Go on from it");
    back.addEventListener("click", () => act.take(i));
    const away = element("button", { type: "button", "aria-label": `Drop ${own.name}` }, "Drop");
    away.addEventListener("click", () => act.drop(i));
    return element("td", {}, back, " ", away);
  }));
  table.replaceChildren(element("thead", {}, head), element("tbody", {}, ...lines, unlike, tools));
}
