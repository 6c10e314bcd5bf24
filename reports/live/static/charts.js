// What a location's stress is made of, and life against fit.
import { drawing, shape } from "./svg.js";

const PARTS = { bypass: "", bearing: "hatch", bending: "dots" };
const MOST_LIFE = 1e8; // lives are drawn up to here, as in the written report
const DASHES = ["", "7 3", "2 2", "7 3 1 3", "1 3"];

export function drawMakeup(place, line, route) {
  const parts = Object.keys(PARTS).map((name) => [name, line[`from_${name}_MPa`]]);
  const total = parts.reduce((sum, [, value]) => sum + value, 0);
  const words = parts.map(([name, value]) => `${name} ${value.toFixed(0)} MPa`).join(", ");
  const [svg, width] = drawing(place, 176, `Row ${line.row}, ${line.sheet}: ${words}`);
  const pads = shape(svg, "defs");
  for (const [name, path] of [["hatch", "M0,6L6,0"], ["dots", "M2,2h1.4v1.4h-1.4z"]]) {
    const pattern = shape(pads, "pattern", { id: name, width: 6, height: 6, patternUnits: "userSpaceOnUse" });
    shape(pattern, "path", { d: path, style: "stroke:#1d2733;stroke-width:.8;fill:#1d2733" });
  }
  const low = Math.min(0, line.peak_min_MPa), edge = Math.max(total, line.peak_max_MPa, 1);
  const x = (stress) => 8 + ((stress - low) / (edge - low)) * (width - 24);
  let from = 0;
  for (const [name, value] of parts) {
    const box = { x: Math.min(x(from), x(from + value)), y: 26, width: Math.abs(x(from + value) - x(from)), height: 34 };
    shape(svg, "rect", { ...box, style: `fill:var(--${name});stroke:var(--ink);stroke-width:.6` });
    if (PARTS[name]) shape(svg, "rect", { ...box, fill: `url(#${PARTS[name]})`, opacity: 0.55 });
    from += value;
  }
  shape(svg, "text", { x: 8, y: 17, "font-size": 12 }, `without credit: ${total.toFixed(0)} MPa at the largest load`);
  const [a, b] = [x(line.peak_min_MPa), x(line.peak_max_MPa)];
  shape(svg, "path", { d: `M${a},70v12M${a},76H${b}M${b},70v12`, style: "stroke:var(--mark);stroke-width:2;fill:none" });
  shape(svg, "text", { class: "mark", x: 8, y: 100, "font-size": 12 },
    `by route ${route}: ${line.peak_min_MPa.toFixed(0)} to ${line.peak_max_MPa.toFixed(0)} MPa`);
  parts.forEach(([name, value], i) => {
    const left = 8 + (i * (width - 16)) / 3;
    shape(svg, "rect", { x: left, y: 118, width: 14, height: 14, style: `fill:var(--${name});stroke:var(--ink);stroke-width:.6` });
    if (PARTS[name]) shape(svg, "rect", { x: left, y: 118, width: 14, height: 14, fill: `url(#${PARTS[name]})`, opacity: 0.55 });
    shape(svg, "text", { x: left + 19, y: 130, "font-size": 12 }, name);
    shape(svg, "text", { class: "soft", x: left + 19, y: 147, "font-size": 12 }, `${value.toFixed(0)} MPa, ${((100 * value) / (total || 1)).toFixed(0)} %`);
  });
}

// The worse sheet of every row; rows of one curve share a line.
function rowLines(lines) {
  const found = [];
  for (const row of new Set(lines.map((line) => line.row))) {
    const own = lines.filter((line) => line.row === row);
    const least = (line) => Math.min(...line.life.map((life) => life ?? Infinity));
    const worse = own.reduce((best, line) => (least(line) < least(best) ? line : best));
    const alike = found.find((line) => line.life.every((life, i) => life === worse.life[i] || Math.abs(life / worse.life[i] - 1) < 1e-6));
    if (alike) alike.rows.push(row); else found.push({ ...worse, rows: [row] });
  }
  return found;
}

export function drawFit(place, curves, answer) {
  const height = 250, pad = { left: 58, right: 12, top: 26, bottom: 40 };
  const lines = rowLines(curves.lines), fits = curves.fit_percent, given = answer.fit.given;
  const first = answer.rows[0];
  const now = given !== null && answer.route === "contact" ? `; this case: ${given} %, ${first.shown.life_flights} flights` : "";
  const [svg, width] = drawing(place, height, `Life of ${lines.length} rows against fit from ${fits[0]} to ${fits.at(-1)} %${now}`);
  const capped = (life) => Math.min(life ?? Infinity, MOST_LIFE);
  const lives = lines.flatMap((line) => line.life.map(capped));
  const bottom = Math.floor(Math.log10(Math.max(Math.min(...lives), 1))), top = Math.max(Math.ceil(Math.log10(Math.max(...lives))), bottom + 1);
  const left = Math.min(fits[0], given ?? 0), right = Math.max(fits.at(-1), given ?? 0);
  const x = (fit) => pad.left + ((fit - left) / (right - left)) * (width - pad.left - pad.right);
  const y = (life) => height - pad.bottom - ((Math.log10(Math.max(life, 1)) - bottom) / (top - bottom)) * (height - pad.top - pad.bottom);
  for (let power = bottom; power <= top; power++) {
    shape(svg, "line", { class: "grid", x1: pad.left, x2: width - pad.right, y1: y(10 ** power), y2: y(10 ** power) });
    const text = shape(svg, "text", { x: pad.left - 6, y: y(10 ** power) + 4, "font-size": 11, "text-anchor": "end" }, "10");
    shape(text, "tspan", { dy: -5, "font-size": 9 }, power);
  }
  for (let fit = Math.ceil(left / 0.5) * 0.5; fit <= right + 1e-9; fit += 0.5) {
    shape(svg, "line", { class: "grid", x1: x(fit), x2: x(fit), y1: pad.top, y2: height - pad.bottom, "stroke-width": fit === 0 ? 2 : 0.6 });
    shape(svg, "text", { x: x(fit), y: height - pad.bottom + 15, "font-size": 11, "text-anchor": "middle" }, fit === 0 ? "snug" : fit.toFixed(1));
  }
  shape(svg, "text", { class: "soft", x: width - pad.right, y: height - 6, "font-size": 11, "text-anchor": "end" }, "interference, % of the hole; below 0 clearance");
  shape(svg, "text", { class: "soft", x: 4, y: 14, "font-size": 11 }, "flights, up to 10^8");
  lines.forEach((line, i) => {
    // a life beyond the picture leaves the line open
    let path = "", pen = "M";
    line.life.forEach((life, k) => {
      if ((life ?? Infinity) > MOST_LIFE) { pen = "M"; return; }
      path += `${pen}${x(fits[k]).toFixed(1)},${y(life).toFixed(1)}`;
      pen = "L";
    });
    const colour = line.rows.includes(first.row) ? "var(--mark)" : "var(--ink)";
    const style = `stroke:${colour};stroke-width:1.9;fill:none;stroke-dasharray:${DASHES[i % DASHES.length] || "none"}`;
    if (path) shape(svg, "path", { d: path, style });
    const foot = height - pad.bottom - 10 - 16 * (lines.length - 1 - i);
    shape(svg, "line", { x1: width - 118, x2: width - 90, y1: foot - 4, y2: foot - 4, style });
    const gone = path ? "" : " (beyond)";
    shape(svg, "text", { x: width - 84, y: foot, "font-size": 11 }, `row${line.rows.length > 1 ? "s" : ""} ${line.rows.join(", ")}${gone}`);
  });
  if (now) {
    const at = [x(given), y(capped(first.life_flights))];
    shape(svg, "rect", { id: "present-fit", x: at[0] - 5, y: at[1] - 5, width: 10, height: 10, style: "fill:var(--mark);stroke:var(--paper)" });
    shape(svg, "text", { class: "mark", x: at[0] - 9, y: Math.max(at[1] - 8, 24), "font-size": 12, "text-anchor": at[0] > 130 ? "end" : "start" }, `now ${first.shown.life_flights}`);
  }
}
