// The ranked table, the case file's text, and the words under the drawings.
import { element } from "./svg.js";

const COLUMNS = [["#"], ["row and sheet", "words"], ["face", "words"], ["life [flights]"], ["no credit"], ["by practice"], ["peak [MPa]"], ["inspect from"], ["used"]];

// `before` holds each place's rank in the last answer: who changed places shows it.
export function drawRows(table, answer, chosen, choose, before) {
  const head = element("tr", {}, ...COLUMNS.map(([words, kind]) => element("th", { scope: "col", className: kind ?? "" }, words)));
  const focused = table.contains(document.activeElement) ? document.activeElement.dataset.place : null;
  const lines = answer.rows.map((line) => {
    const place = `${line.row}|${line.sheet}`, was = before.get(place);
    const moved = was === undefined || was === line.rank ? "" : ` (was ${was})`;
    const pick = element("button", { type: "button", className: "plain", "data-place": place, title: "Show its stress make-up" }, `${line.row}, ${line.sheet}`);
    pick.addEventListener("click", () => choose(place));
    const cells = [`${line.rank}${moved}`, pick, line.shown.face, line.shown.life_flights, line.shown.life_no_credit_flights,
      line.shown.life_practice_flights, line.peak_max_MPa.toFixed(0), line.shown.threshold_flights, line.shown.share_used];
    const made = element("tr", { className: line.rank === 1 ? "first" : "" },
      ...cells.map((cell, i) => element("td", { className: COLUMNS[i][1] ?? "" }, cell)));
    if (place === chosen) made.setAttribute("aria-current", "true");
    return made;
  });
  table.replaceChildren(element("thead", {}, head), element("tbody", {}, ...lines));
  if (focused) [...table.querySelectorAll("button")].find((own) => own.dataset.place === focused)?.focus();
}

export function drawToml(place, text, opened) {
  const before = new Map();
  for (const line of opened.split("\n")) before.set(line, (before.get(line) ?? 0) + 1);
  const lines = text.split("\n").flatMap((line) => {
    const left = before.get(line) ?? 0;
    before.set(line, left - 1);
    return [left > 0 || line === "" ? line : element("mark", {}, line), "\n"];
  });
  place.replaceChildren(...lines);
}

export function placeWords(line) {
  const flags = line.flags ? ` Flagged: ${line.flags}.` : "";
  return `Row ${line.row}, ${line.sheet}, on the ${line.shown.face}, ${line.angle_deg?.toFixed(0) ?? "-"} degrees from the load; ` +
    `takes ${(100 * line.transfer_fraction).toFixed(0)} % of the load.${flags}`;
}
