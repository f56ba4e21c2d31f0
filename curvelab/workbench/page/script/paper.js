// Bands on exact axes: the paper with its lines and labels, edges, halos and limits. Draws; knows no pointer.

import { edgesOf, quantityOf } from "./bands.js";
import { bracketOf, isOf } from "./limits.js";
import { area, LINE_DASH, LINE_WIDTH, stroke, typeScale, words } from "./paint.js";
import { humanTimes, ticksOf } from "./ticks.js";
import { BASE_NAMES, QUANTITY_NAMES } from "./words.js";

const MARGIN = { left: 66, right: 46, top: 30, bottom: 46 };
const NORMAL_95 = 1.959964;

/** From scaled values to pixels and back. `window` is [[low, high] current, [low, high] value], scaled. */
export class Frame {
  constructor(window, width, height, axes) {
    Object.assign(this, { window, width, height, axes });
    this.type = typeScale();
    this.left = MARGIN.left * this.type;
    this.top = MARGIN.top * this.type;
    this.wide = Math.max(10, width - this.left - MARGIN.right * this.type);
    this.high = Math.max(10, height - this.top - MARGIN.bottom * this.type);
  }

  scaled(value, i) {
    return this.axes[i].scale === "log" ? Math.log10(value) : value;
  }

  unscaled(value, i) {
    return this.axes[i].scale === "log" ? 10 ** value : value;
  }

  pixelOfScaled([u, v]) {
    const [[u0, u1], [v0, v1]] = this.window;
    return [this.left + ((u - u0) / (u1 - u0)) * this.wide, this.top + ((v1 - v) / (v1 - v0)) * this.high];
  }

  pixel(current, value) {
    return this.pixelOfScaled([this.scaled(current, 0), this.scaled(value, 1)]);
  }

  scaledAt([x, y]) {
    const [[u0, u1], [v0, v1]] = this.window;
    return [u0 + ((x - this.left) / this.wide) * (u1 - u0), v1 - ((y - this.top) / this.high) * (v1 - v0)];
  }

  valuesAt(pixel) {
    return this.scaledAt(pixel).map((each, i) => this.unscaled(each, i));
  }

  contains([x, y]) {
    return x >= this.left && x <= this.left + this.wide && y >= this.top && y <= this.top + this.high;
  }
}

export function clipped(context, frame, draw) {
  context.save();
  context.beginPath();
  context.rect(frame.left, frame.top, frame.wide, frame.high);
  context.clip();
  draw();
  context.restore();
}

export function drawPaper(context, frame, ink) {
  const { left, top, wide, high, type } = frame;
  context.fillStyle = ink("paper");
  context.fillRect(left, top, wide, high);
  frame.axes.forEach((axis, i) => {
    const [low, end] = frame.window[i];
    for (const tick of ticksOf(axis, low, end, i ? high : wide)) {
      const at = frame.pixelOfScaled(i ? [frame.window[0][0], tick.at] : [tick.at, frame.window[1][0]]);
      const [x, y] = at.map(crisp);
      const line = i ? [[left, y], [left + wide, y]] : [[x, top], [x, top + high]];
      stroke(context, line, { colour: ink(tick.rank ? "grid-minor" : "grid-major"), width: 1 });
      if (!tick.label) continue;
      const look = { colour: ink(tick.rank ? "quiet" : "graphite"), size: (tick.rank ? 10.5 : 12) * type };
      if (i) words(context, tick.label, left - 8, at[1], { ...look, align: "right", base: "middle" });
      else words(context, tick.label, at[0], top + high + 8, { ...look, align: "center", base: "top" });
    }
  });
  const foot = crisp(top + high);
  stroke(context, [[crisp(left), top], [crisp(left), foot], [left + wide, foot]], { colour: ink("graphite"), width: 1 });
  const [currentAxis, valueAxis] = frame.axes;
  const below = BASE_NAMES[currentAxis.base] ?? currentAxis.base;
  words(context, below, left + wide, top + high + 38 * type, { colour: ink("quiet"), size: 12 * type, align: "right" });
  words(context, QUANTITY_NAMES[valueAxis.quantity] ?? "", 4 * type, top - 12 * type, { colour: ink("quiet"), size: 12 * type });
  if (valueAxis.quantity === "time") drawHumanTimes(context, frame, ink);
}

function drawHumanTimes(context, frame, ink) {
  const [low, high] = frame.window[1].map((each) => frame.unscaled(each, 1));
  for (const [seconds, name] of humanTimes(low, high)) {
    const [, y] = frame.pixelOfScaled([frame.window[0][0], frame.scaled(seconds, 1)]);
    const right = frame.left + frame.wide;
    stroke(context, [[right, y], [right + 5, y]], { colour: ink("quiet"), width: 1 });
    words(context, name, right + 8, y, { colour: ink("quiet"), size: 10.5 * frame.type, base: "middle" });
  }
}

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
        stroke(context, points, { colour: look.colour, width: LINE_WIDTH[edge], dash: LINE_DASH[edge], alpha: look.faint ? 0.4 : 1 });
      }
    }
  });
}

const HATCHES = [[], [[0, 8, 8, 0]], [[0, 0, 8, 8]], [[4, 0, 4, 8]], [[0, 4, 8, 4]], [[0, 8, 8, 0], [0, 0, 8, 8]], [[4, 3, 4, 5], [0, 7, 0, 8]], [[4, 0, 4, 8], [0, 4, 8, 4]]];

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
  const points = edges[0]?.parts.flatMap((part) => pixelsOf(frame, part)).filter((point) => frame.contains(point)) ?? [];
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
  words(context, subject.letter, x, y + 0.5, { colour: ink(subject.colour), size: 11 * frame.type, align: "center", base: "middle" });
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
    const reach = [part.sd_current[k], part[name][k]].map((sd, i) => (sd === null ? null : (NORMAL_95 * sd * perDecade[i]) / Math.LN10));
    const across = reach[0] === null ? reach[1] : reach[1] === null ? reach[0] : (reach[0] * reach[1]) / (Math.hypot(...reach) || 1);
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

export function drawLimits(context, frame, limits, ink, chosen = null) {
  const said = [];
  for (const limit of limits) {
    const at = frame.pixel(limit.current, limit.time);
    if (!frame.contains(at)) continue;
    const { corners, beside } = bracketOf(limit);
    const colour = limit.settled ? ink("graphite") : ink("open");
    const width = isOf(limit, chosen) ? 2.8 : 1.4;
    stroke(context, corners.map(([x, y]) => [at[0] + x, at[1] + y]), { colour, width });
    if (said.some((each) => each.words === limit.words && Math.hypot(each.at[0] - at[0], each.at[1] - at[1]) < 40)) continue;
    const look = { colour, size: 11 * frame.type, ground: ink("paper") };
    said.push({ words: limit.words, at, box: drawBeside(context, limit.words, at, beside, look, said.map((each) => each.box)) });
  }
}

/** Words beside a bracket, moved away from it until they cover none of the boxes taken; gives the box they take. */
function drawBeside(context, text, [x, y], [dx, dy, align, base], look, taken) {
  context.save();
  context.font = `${look.size}px ${getComputedStyle(context.canvas).fontFamily}`;
  const wide = context.measureText(text).width + 6;
  context.restore();
  const left = x + dx - (align === "right" ? wide : align === "center" ? wide / 2 : 0);
  const boxAt = (shift) => {
    const top = y + dy + shift - (base === "bottom" ? look.size : base === "middle" ? look.size / 2 : 0);
    return [left, top, left + wide, top + look.size + 2];
  };
  const step = (dy < 0 ? -1 : 1) * (look.size + 3);
  const shifts = [0, 1, 2, 3].map((each) => each * step);
  const shift = shifts.find((each) => taken.every((box) => apart(box, boxAt(each)))) ?? 0;
  words(context, text, x + dx, y + dy + shift, { ...look, align, base });
  return boxAt(shift);
}

const apart = (one, other) => one[2] <= other[0] || other[2] <= one[0] || one[3] <= other[1] || other[3] <= one[1];

/** On the middle of a pixel, so that a hairline is one. */
const crisp = (at) => Math.round(at - 0.5) + 0.5;

/** A hairline cross with the place open. */
export function drawCross(context, place, box, colour) {
  const [x, y] = place.map(crisp);
  const gap = 5;
  const look = { colour, width: 1, alpha: 0.7 };
  stroke(context, [[box.left, y], [x - gap, y]], look);
  stroke(context, [[x + gap, y], [box.left + box.wide, y]], look);
  stroke(context, [[x, box.top], [x, y - gap]], look);
  stroke(context, [[x, y + gap], [x, box.top + box.high]], look);
}
