// The section through the splice, to scale, from the shapes the engine gives in millimetres.
import { drawing, shape } from "./svg.js";

export function drawSection(place, answer, chosen, choose) {
  const { section, rows } = answer;
  const first = rows[0];
  const tallest = Math.max(...section.fasteners.map((own) => own.diameter));
  const ys = section.sheets.flatMap((own) => own.outline.map((corner) => corner[1]));
  const top = Math.max(...ys), bottom = Math.min(...ys);
  const span = section.right - section.left;
  const width = Math.max(280, place.clientWidth);
  const scale = Math.min((width - 76) / span, 260 / (top - bottom + 1.4 * tallest));
  const x = (mm) => (width - span * scale) / 2 + (mm - section.left) * scale;
  const above = 66 + 0.5 * tallest * scale;
  const y = (mm) => above + (top - mm) * scale;
  const height = y(bottom) + 0.55 * tallest * scale + 52;
  const [svg] = drawing(place, height, `Section: row ${first.row}, ${first.sheet} goes first, ${first.shown.face}`);
  const points = (corners) => corners.map(([a, b]) => `${x(a).toFixed(1)},${y(b).toFixed(1)}`).join(" ");

  for (const sheet of section.sheets)
    shape(svg, "polygon", { points: points(sheet.outline), style: "fill:var(--metal);stroke:var(--ink);stroke-width:.8" });
  for (const hole of section.holes) drawHole(svg, hole, x, y, scale, chosen, choose, rows);
  for (const bay of section.bays) drawBay(svg, bay, section, x, y, scale);
  for (const own of section.fasteners) drawFastener(svg, own, points, x, y);
  drawNames(svg, section, x, y, top, bottom, tallest, scale, width);

  const hole = section.holes.find((own) => own.rank === 1);
  for (const side of [-0.5, 0.5])
    shape(svg, "circle", { cx: x(hole.x + side * hole.diameter), cy: y(hole.start), r: 5.5, style: "fill:none;stroke:var(--mark);stroke-width:2" });
  const words = `first: row ${first.row}, ${first.sheet}, ${first.shown.life_flights} flights`;
  const title = shape(svg, "text", { class: "mark", y: 16, "font-size": 13 }, words);
  const long = title.getComputedTextLength();
  if (long > width - 8) title.setAttribute("textLength", width - 8);
  title.setAttribute("x", Math.max(4, Math.min(x(hole.x) - 12, width - 4 - long)));
  shape(svg, "line", { x1: x(hole.x + hole.diameter / 2), y1: y(hole.start) - 6, x2: x(hole.x + hole.diameter / 2), y2: 22, style: "stroke:var(--mark)" });
}

function drawHole(svg, hole, x, y, scale, chosen, choose, rows) {
  const reach = 1.15 * hole.diameter;
  const mine = chosen === `${hole.row}|${hole.sheet}`;
  const box = shape(svg, "rect", {
    class: "hole", x: x(hole.x - reach), y: y(hole.middle + hole.thickness / 2), width: 2 * reach * scale,
    height: hole.thickness * scale, fill: hole.fill,
    style: mine ? "stroke:var(--mark);stroke-width:2.4" : "stroke:var(--ink);stroke-width:.5",
  });
  const line = rows[hole.rank - 1];
  shape(box, "title", {}, `row ${hole.row}, ${hole.sheet}: ${line.shown.life_flights} flights`);
  box.addEventListener("click", () => choose(`${hole.row}|${hole.sheet}`));
}

// Each bay's share of the load is a band as thick as the share.
function drawBay(svg, bay, section, x, y, scale) {
  const at = (mm) => section.fasteners.find((own) => Math.abs(own.x - mm) < 1e-9)?.diameter ?? 0;
  const from = bay.from + 1.3 * at(bay.from), to = bay.to - 1.3 * at(bay.to);
  if (to <= from) return;
  const band = 0.62 * section.sheets[bay.sheet].thickness * bay.share * scale;
  shape(svg, "rect", { x: x(from), y: y(bay.middle) - band / 2, width: (to - from) * scale, height: band, style: "fill:var(--band)" });
  if ((to - from) * scale > 40 && section.sheets[bay.sheet].thickness * scale > 10)
    shape(svg, "text", { x: x((from + to) / 2), y: y(bay.middle) + 4, "font-size": 11, "text-anchor": "middle" }, `${(100 * bay.share).toFixed(0)} %`);
}

function drawFastener(svg, own, points, x, y) {
  const d = own.diameter, style = "fill:var(--paper);stroke:var(--ink);stroke-width:.9";
  const polygon = (corners) => shape(svg, "polygon", { points: points(corners.map(([a, b]) => [own.x + a, b])), style });
  polygon([[-d / 2, own.bottom], [d / 2, own.bottom], [d / 2, own.top], [-d / 2, own.top]]);
  for (const [side, face, up] of [["top", own.top, 1], ["bottom", own.bottom, -1]]) {
    if (own.sunk === side) { // a countersunk head of 100 degrees, as in the written section
      const wide = d / 2 + own.depth * Math.tan((50 * Math.PI) / 180), inner = face - up * own.depth;
      polygon([[-wide, face], [wide, face], [d / 2, inner], [-d / 2, inner]]);
    } else if (own.riveted) {
      const angles = Array.from({ length: 25 }, (_, i) => (i * Math.PI) / 24);
      polygon(angles.map((a) => [0.75 * d * Math.cos(a), face + up * 0.45 * d * Math.sin(a)]));
    } else {
      polygon([[-0.8 * d, face], [0.8 * d, face], [0.8 * d, face + up * 0.45 * d], [-0.8 * d, face + up * 0.45 * d]]);
    }
  }
  shape(svg, "line", { x1: x(own.x), x2: x(own.x), y1: y(own.bottom - 0.75 * d), y2: y(own.top + 0.75 * d), style: "stroke:var(--soft);stroke-width:.6;stroke-dasharray:8 2 2 2" });
}

function drawNames(svg, section, x, y, top, bottom, tallest, scale, width) {
  for (const own of section.fasteners)
    shape(svg, "text", { x: x(own.x), y: y(top) - 0.5 * tallest * scale - 14, "font-size": 12, "font-weight": 600, "text-anchor": "middle" }, `row ${own.row}`);
  const low = y(bottom) + 0.5 * tallest * scale;
  section.sheets.forEach((sheet, s) => {
    const upper = s < section.sheets.length / 2;
    const corners = sheet.outline.map((corner) => corner[1]);
    const side = Math.min(Math.max(x(sheet.loaded ? section.left : section.right), 4), width - 4);
    const text = shape(svg, "text", { class: "soft", x: side, "font-size": 11.5, "text-anchor": sheet.loaded ? "start" : "end" },
      `${sheet.name}, ${+sheet.thickness.toPrecision(4)} mm`);
    const next = section.fasteners.at(sheet.loaded ? 0 : -1);
    const room = Math.abs(side - x(next.x)) - 0.8 * next.diameter * scale;
    // beside the sheet where there is room, else clear of the heads
    const beside = upper ? y(Math.max(...corners)) - 5 : y(Math.min(...corners)) + 13;
    const clear = upper ? y(top) - 0.5 * tallest * scale - 30 : low + 14;
    text.setAttribute("y", text.getComputedTextLength() < room ? beside : clear);
    const corner = sheet.outline, level = (sheet.loaded ? corner[0][1] + corner.at(-1)[1] : 0) / 2;
    if (sheet.loaded) arrow(svg, x(section.left) - 4, -1, y(level));
    const last = corner.slice(corner.length / 2 - 1, corner.length / 2 + 1);
    if (sheet.out) arrow(svg, x(section.right) + 4, 1, y((last[0][1] + last[1][1]) / 2));
  });
  section.fasteners.slice(1).forEach((own, i) => {
    const before = section.fasteners[i].x;
    shape(svg, "line", { x1: x(before) + 3, x2: x(own.x) - 3, y1: low + 26, y2: low + 26, style: "stroke:var(--soft);stroke-width:.8" });
    for (const end of [before, own.x]) shape(svg, "line", { x1: x(end), x2: x(end), y1: low + 22, y2: low + 30, style: "stroke:var(--soft);stroke-width:.8" });
    shape(svg, "text", { class: "soft", x: x((before + own.x) / 2), y: low + 41, "font-size": 11, "text-anchor": "middle" }, `${+(own.x - before).toPrecision(6)} mm`);
  });
  if (section.symmetric) {
    shape(svg, "line", { x1: x(section.right), x2: x(section.right), y1: y(top) - 0.6 * tallest * scale, y2: low + 12, style: "stroke:var(--soft);stroke-dasharray:12 3 2 3" });
    shape(svg, "text", { class: "soft", x: x(section.right) - 4, y: low + 24, "font-size": 11, "text-anchor": "end" }, "line of symmetry");
  }
}

function arrow(svg, from, way, level) {
  const tip = from + way * 28;
  shape(svg, "path", { d: `M${from},${level}H${tip}M${tip - way * 7},${level - 4}L${tip},${level}L${tip - way * 7},${level + 4}`, class: "line", "stroke-width": 1.6 });
  if (way < 0) shape(svg, "text", { x: from - 16, y: level - 6, "font-size": 13, "font-style": "italic" }, "S");
}
