// A band on exact axes: what lies between its edges, the edges in their styles, and their intervals of true width.

import { edgesOf, quantityOf } from "./bands.js";
import { area, LINE_DASH, LINE_WIDTH, stroke, words } from "./paint.js";
import { clipped } from "./paper.js";

const NORMAL_95 = 1.959964;
const HATCHES = [
  [],
  [[0, 8, 8, 0]],
  [[0, 0, 8, 8]],
  [[4, 0, 4, 8]],
  [[0, 4, 8, 4]],
  [
    [0, 8, 8, 0],
    [0, 0, 8, 8],
  ],
  [
    [4, 3, 4, 5],
    [0, 7, 0, 8],
  ],
  [
    [4, 0, 4, 8],
    [0, 4, 8, 4],
  ],
];

export function drawBand(context, frame, band, look) {
  clipped(context, frame, () => {
    if (band.fast && band.slow && !look.faint) {
      const outline = between(frame, band);
      area(context, outline, { colour: look.colour, alpha: 0.1 });
      if (look.hatch) area(context, outline, { colour: hatching(context, look.colour, look.hatch), alpha: 0.5 });
    }
    for (const [edge, curve] of edgesOf(band)) {
      for (const part of curve.parts) {
        const points = pixelsOf(frame, part);
        if (!look.faint) area(context, halo(frame, part, points), { colour: look.colour, alpha: 0.28 });
        stroke(context, points, {
          colour: look.colour,
          width: LINE_WIDTH[edge],
          dash: LINE_DASH[edge],
          alpha: look.faint ? 0.4 : 1,
        });
      }
    }
  });
}

/** A pattern that tells devices apart without colour; the first has none. */
function hatching(context, colour, index) {
  const tile = document.createElement("canvas");
  tile.width = tile.height = 8;
  const pen = tile.getContext("2d");
  pen.strokeStyle = colour;
  pen.lineWidth = 0.7;
  for (const [x0, y0, x1, y1] of HATCHES[index % HATCHES.length]) {
    pen.beginPath();
    pen.moveTo(x0, y0);
    pen.lineTo(x1, y1);
    pen.stroke();
  }
  return context.createPattern(tile, "repeat");
}

/** The device's letter on its slowest line, each lower than the one before. */
export function drawTag(context, frame, subject, ink) {
  const edges = subject.bands.flatMap((band) => ["slow", "mean", "fast"].map((edge) => band[edge]).filter(Boolean));
  const points =
    edges[0]?.parts.flatMap((part) => pixelsOf(frame, part)).filter((point) => frame.contains(point)) ?? [];
  if (!points.length) return;
  const wanted = frame.top + frame.high * (0.08 + ((subject.index * 0.06) % 0.7));
  const [x, y] = points.reduce((one, other) => (Math.abs(other[1] - wanted) < Math.abs(one[1] - wanted) ? other : one));
  const size = 8.5 * frame.type;
  context.save();
  context.beginPath();
  context.arc(x, y, size, 0, 2 * Math.PI);
  context.fillStyle = ink("paper");
  context.fill();
  context.strokeStyle = ink(subject.colour);
  context.stroke();
  context.restore();
  words(context, subject.letter, x, y + 0.5, {
    colour: ink(subject.colour),
    size: 11 * frame.type,
    align: "center",
    base: "middle",
  });
}

function pixelsOf(frame, part) {
  const values = part[quantityOf(part)];
  return part.current.map((current, k) => frame.pixel(current, values[k]));
}

function between(frame, band) {
  const along = (edge) => edge.parts.flatMap((part) => pixelsOf(frame, part));
  const [fast, slow] = [along(band.fast), along(band.slow)];
  // Right of the fast edge's end everything down to there lies between the edges.
  const corner = [slow.at(-1)[0], Math.max(slow.at(-1)[1], fast.at(-1)[1])];
  return [...fast, corner, ...slow.reverse()];
}

/** The outline of the 95 % interval of true width, across the line. */
function halo(frame, part, points) {
  const name = `sd_${quantityOf(part)}`;
  const perDecade = [frame.wide, frame.high].map((size, i) => size / (frame.window[i][1] - frame.window[i][0]));
  const one = [];
  const other = [];
  points.forEach(([x, y], k) => {
    const reach = [part.sd_current[k], part[name][k]].map((sd, i) =>
      sd === null ? null : (NORMAL_95 * sd * perDecade[i]) / Math.LN10,
    );
    const across =
      reach[0] === null ? reach[1] : reach[1] === null ? reach[0] : (reach[0] * reach[1]) / (Math.hypot(...reach) || 1);
    if (across === null) return;
    const [before, after] = [points[Math.max(0, k - 1)], points[Math.min(points.length - 1, k + 1)]];
    const [dx, dy] = [after[0] - before[0], after[1] - before[1]];
    const length = Math.hypot(dx, dy) || 1;
    const [nx, ny] = [(-dy / length) * across, (dx / length) * across];
    one.push([x + nx, y + ny]);
    other.push([x - nx, y - ny]);
  });
  return [...one, ...other.reverse()];
}
