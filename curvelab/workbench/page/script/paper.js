// Exact axes: from values to pixels and back, the paper with its lines and labels, and the cross.

import { line, typeScale, words } from "./paint.js";
import { humanTimes, ticksOf } from "./ticks.js";
import { BASE_NAMES, QUANTITY_NAMES } from "./words.js";

const MARGIN = { left: 66, right: 46, top: 30, bottom: 46 };

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
      const ends = i ? [left, y, left + wide, y] : [x, top, x, top + high];
      line(context, ends, { colour: ink(tick.rank ? "grid-minor" : "grid-major"), width: 1 });
      if (!tick.label) continue;
      const look = { colour: ink(tick.rank ? "quiet" : "graphite"), size: (tick.rank ? 10.5 : 12) * type };
      if (i) words(context, tick.label, left - 8, at[1], { ...look, align: "right", base: "middle" });
      else words(context, tick.label, at[0], top + high + 8, { ...look, align: "center", base: "top" });
    }
  });
  const foot = crisp(top + high);
  line(context, [crisp(left), top, crisp(left), foot], { colour: ink("graphite"), width: 1 });
  line(context, [crisp(left), foot, left + wide, foot], { colour: ink("graphite"), width: 1 });
  const [currentAxis, valueAxis] = frame.axes;
  const below = BASE_NAMES[currentAxis.base] ?? currentAxis.base;
  words(context, below, left + wide, top + high + 38 * type, { colour: ink("quiet"), size: 12 * type, align: "right" });
  words(context, QUANTITY_NAMES[valueAxis.quantity] ?? "", 4 * type, top - 12 * type, {
    colour: ink("quiet"),
    size: 12 * type,
  });
  if (valueAxis.quantity === "time") drawHumanTimes(context, frame, ink);
}

function drawHumanTimes(context, frame, ink) {
  const [low, high] = frame.window[1].map((each) => frame.unscaled(each, 1));
  for (const [seconds, name] of humanTimes(low, high)) {
    const [, y] = frame.pixelOfScaled([frame.window[0][0], frame.scaled(seconds, 1)]);
    const right = frame.left + frame.wide;
    line(context, [right, y, right + 5, y], { colour: ink("quiet"), width: 1 });
    words(context, name, right + 8, y, { colour: ink("quiet"), size: 10.5 * frame.type, base: "middle" });
  }
}

/** On the middle of a pixel, so that a hairline is one. */
const crisp = (at) => Math.round(at - 0.5) + 0.5;

/** A hairline cross with the place open. */
export function drawCross(context, place, box, colour) {
  const [x, y] = place.map(crisp);
  const gap = 5;
  const look = { colour, width: 1, alpha: 0.7 };
  line(context, [box.left, y, x - gap, y], look);
  line(context, [x + gap, y, box.left + box.wide, y], look);
  line(context, [x, box.top, x, y - gap], look);
  line(context, [x, y + gap, x, box.top + box.high], look);
}
