// What curvelab draws over the sheet: hairlines where it believes the grid is, the lines it traced, and what it was told.

import { area, LINE_DASH, stroke } from "./paint.js";

const TRACE_WIDTH = { fast: 1, slow: 2, mean: 1.4 };
const STEPS = 8;

/** The decade lines of both axes, as places on the sheet; worked out once for a reading. */
export function gridOf(plane) {
  const [currents, values] = plane.extent;
  const lines = [];
  const along = (from, to, at) => {
    const points = [];
    for (let k = 0; k <= STEPS; k += 1) points.push(plane.placeOfScaled(at(from + ((to - from) * k) / STEPS)));
    if (points.every(Boolean)) lines.push(points);
  };
  if (plane.current.scale === "log") for (const u of decades(currents)) along(...values, (v) => [u, v]);
  if (plane.value.scale === "log") for (const v of decades(values)) along(...currents, (u) => [u, v]);
  return lines;
}

function decades([low, high]) {
  const found = [];
  for (let power = Math.ceil(low - 1e-6); power <= Math.floor(high + 1e-6); power += 1) found.push(power);
  return found;
}

export function drawPicture(context, tiles, view) {
  const deviceScale = view.scale * (window.devicePixelRatio || 1);
  const level = tiles.levelFor(deviceScale);
  context.imageSmoothingEnabled = deviceScale < 3 * tiles.perUnit;
  context.imageSmoothingQuality = "high";
  const draw = (image, [x0, y0, x1, y1]) => {
    const from = view.toScreen([x0, y0]);
    const to = view.toScreen([x1, y1]);
    context.drawImage(image, ...from, to[0] - from[0], to[1] - from[1]);
  };
  context.save();
  const [left, top] = view.toScreen(tiles.origin);
  context.beginPath();
  context.rect(left, top, view.sheetWidth * view.scale, view.sheetHeight * view.scale);
  context.clip();
  if (level < tiles.coarsest) tiles.visit(view.box, Math.min(tiles.coarsest, level + 3), draw);
  tiles.visit(view.box, level, draw);
  context.restore();
}

export function drawGrid(context, view, grid, ink) {
  for (const line of grid)
    stroke(
      context,
      line.map((each) => view.toScreen(each)),
      { colour: ink("on-paper"), width: 0.6, alpha: 0.55 },
    );
}

export function drawTraces(context, view, curves, ink, chosen) {
  curves.forEach((curve, index) => {
    const { x, y } = curve.points;
    const points = [];
    const lone = chosen !== null && (curve.entry ?? index) !== chosen;
    const look = {
      colour: ink("trace"),
      width: TRACE_WIDTH[curve.edge] ?? 1,
      dash: LINE_DASH[curve.edge] ?? [],
      alpha: lone ? 0.35 : 1,
    };
    const breaks = new Set(gapStarts(curve));
    for (let k = 0; k < x.length; k += 1) {
      if (x[k] === null) continue;
      points.push(view.toScreen([x[k], y[k]]));
      if (breaks.has(k)) {
        stroke(context, points, look);
        points.length = 0;
      }
    }
    stroke(context, points, look);
    for (const gap of curve.gaps) {
      stroke(
        context,
        [gap.from, gap.to].map((each) => view.toScreen(each)),
        { colour: ink("open-on-paper"), width: 1.4, dash: [3, 3] },
      );
    }
  });
}

/** Indices of the points after which the line has a gap. */
function gapStarts({ points: { x, y }, gaps }) {
  return gaps.map((gap) => {
    let [best, index] = [Infinity, -1];
    for (let k = 0; k < x.length; k += 1) {
      const away = x[k] === null ? Infinity : Math.hypot(x[k] - gap.from[0], y[k] - gap.from[1]);
      if (away < best) [best, index] = [away, k];
    }
    return index;
  });
}

/** Places a person gave: rings where a line passes, hatched boxes where it does not. */
export function drawTold(context, view, entries, ink, chosen) {
  entries.forEach((entry, index) => {
    const alpha = chosen === null || chosen === index ? 1 : 0.35;
    context.save();
    context.globalAlpha = alpha;
    context.strokeStyle = ink("on-paper");
    context.lineWidth = 1.2;
    for (const place of entry.through ?? []) {
      const [x, y] = view.toScreen(place);
      context.beginPath();
      context.arc(x, y, 5, 0, 2 * Math.PI);
      context.stroke();
    }
    context.restore();
    for (const box of entry.avoid ?? []) drawBox(context, view, box, ink, alpha);
  });
}

export function drawBox(context, view, [x0, y0, x1, y1], ink, alpha = 1) {
  const corners = [
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
    [x0, y0],
  ].map((each) => view.toScreen(each));
  area(context, corners, { colour: ink("open-on-paper"), alpha: 0.12 * alpha });
  stroke(context, corners, { colour: ink("open-on-paper"), width: 1.2, dash: [5, 3], alpha });
}

/** A ring about the open entry one has gone to. */
export function drawOpen(context, view, entry, ink) {
  if (!entry?.at) return;
  const [x, y] = view.toScreen(entry.at);
  const look = { colour: ink("open-on-paper"), width: 2 };
  const ring = Array.from({ length: 41 }, (_, k) => [
    x + 17 * Math.cos((k * Math.PI) / 20),
    y + 17 * Math.sin((k * Math.PI) / 20),
  ]);
  stroke(context, ring, look);
}

/** Nearest traced curve to a place: { index, away } in pixels on screen, or null beyond `reach`. */
export function nearestCurve(view, curves, place, reach = 12) {
  let nearest = null;
  const far = reach / view.scale;
  curves.forEach((curve, index) => {
    const { x, y } = curve.points;
    for (let k = 1; k < x.length; k += 1) {
      if (x[k] === null || x[k - 1] === null) continue;
      if (Math.abs(x[k] - place[0]) > far + 40 / view.scale && Math.abs(x[k - 1] - place[0]) > far + 40 / view.scale)
        continue;
      const away = distance(place, [x[k - 1], y[k - 1]], [x[k], y[k]]);
      if (away <= far && (!nearest || away < nearest.away)) nearest = { index: curve.entry ?? index, curve, away };
    }
  });
  return nearest;
}

function distance([px, py], [ax, ay], [bx, by]) {
  const [dx, dy] = [bx - ax, by - ay];
  const share = Math.min(1, Math.max(0, ((px - ax) * dx + (py - ay) * dy) / (dx * dx + dy * dy || 1)));
  return Math.hypot(px - ax - share * dx, py - ay - share * dy);
}
