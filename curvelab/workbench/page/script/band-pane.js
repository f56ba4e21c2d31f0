// Bands of one device or several on one pair of exact axes, with a window that is moved by hand and keys.

import { spanOf } from "./bands.js";
import { drawBand, drawTag } from "./band-ink.js";
import { el } from "./dom.js";
import { drawLimits } from "./limit-ink.js";
import { Canvas, inks } from "./paint.js";
import { drawCross, drawPaper, Frame } from "./paper.js";
import { windowGestures } from "./window-gestures.js";

export class BandPane {
  constructor(label) {
    const words = `${label} Arrow keys move the cross, plus and minus zoom, zero shows all.`;
    this.canvasNode = el("canvas", {
      tabindex: 0,
      role: "application",
      "aria-roledescription": "bands",
      "aria-label": words,
    });
    this.empty = el("p", { class: "pane-empty" });
    this.node = el("section", { class: "pane twin-pane", "aria-label": label }, this.canvasNode, this.empty);
    this.ink = inks(this.canvasNode);
    this.canvas = new Canvas(this.canvasNode, (context) => this.draw(context));
    this.window = null;
    this.full = null;
    this.subjects = [];
    this.limits = [];
    this.chosen = null;
    this.at = null;
    matchMedia("(prefers-color-scheme: dark)").addEventListener("change", () => (this.ink = inks(this.canvasNode)));
    windowGestures(this.canvasNode, this);
  }

  /** Show subjects [{ bands, colour, letter, index }] with axes and the full window of both, scaled. */
  show({ subjects, limits = [], axes, full }) {
    Object.assign(this, { subjects, limits, axes });
    const changed = String(full) !== String(this.full);
    this.full = full;
    if (!full) this.window = null;
    else if (!this.window || changed) this.window = full.map((each) => [...each]);
    this.canvas.redraw();
  }

  frame() {
    return this.window && new Frame(this.window, this.canvas.width, this.canvas.height, this.axes);
  }

  draw(context) {
    const frame = this.frame();
    if (!frame) return;
    drawPaper(context, frame, this.ink);
    this.drawWithin(context, frame);
    const values = this.values();
    if (!values || values.some((each) => !(each > 0))) return;
    const at = frame.pixel(...values);
    if (frame.contains(at)) drawCross(context, at, frame, this.ink("graphite"));
  }

  drawWithin(context, frame) {
    const several = this.subjects.some((subject) => subject.letter) && this.subjects.length > 1;
    for (const subject of this.subjects) {
      const look = { colour: this.ink(subject.colour), hatch: several ? subject.index : 0, faint: subject.faint };
      for (const band of subject.bands) drawBand(context, frame, band, look);
    }
    drawLimits(context, frame, this.limits, this.ink, this.chosen);
    if (several) for (const subject of this.subjects) drawTag(context, frame, subject, this.ink);
  }

  /** Current and value at the cross, or null. */
  values() {
    return this.at;
  }

  moveTo(values) {
    this.at = values;
    this.canvas.redraw();
    this.onmove?.(values);
  }

  pointed(pixel) {
    const frame = this.frame();
    this.moveTo(frame?.contains(pixel) ? frame.valuesAt(pixel) : null);
  }

  left() {
    if (document.activeElement !== this.canvasNode) this.moveTo(null);
  }

  cross() {
    const frame = this.frame();
    const values = this.values();
    return values ? frame.pixel(...values) : [frame.left + frame.wide / 2, frame.top + frame.high / 2];
  }

  stepped([dx, dy]) {
    const frame = this.frame();
    const [x, y] = this.cross();
    const at = [
      Math.min(frame.left + frame.wide, Math.max(frame.left, x + dx)),
      Math.min(frame.top + frame.high, Math.max(frame.top, y + dy)),
    ];
    this.moveTo(frame.valuesAt(at), "keys");
  }

  panned(dx, dy) {
    const frame = this.frame();
    const [[u0, u1], [v0, v1]] = this.window;
    const move = [(-dx / frame.wide) * (u1 - u0), (dy / frame.high) * (v1 - v0)];
    this.#take(this.window.map((each, i) => each.map((end) => end + move[i])));
  }

  zoomed(factor, pixel) {
    const at = this.frame().scaledAt(pixel);
    this.#take(this.window.map(([low, high], i) => [at[i] - (at[i] - low) / factor, at[i] + (high - at[i]) / factor]));
  }

  whole() {
    this.#take(this.full.map((each) => [...each]));
  }

  /** The window stays within the plot and wider than a thousandth of it. */
  #take(window) {
    this.window = window.map(([low, high], i) => {
      const [least, most] = this.full[i];
      const size = Math.min(most - least, Math.max((most - least) / 1000, high - low));
      const start = Math.min(most - size, Math.max(least, low));
      return [start, start + size];
    });
    this.canvas.redraw();
    this.onwindow?.(this.window);
  }
}

export const typedAxes = (base, quantity = "time") => [
  { quantity: "current", scale: "log", base },
  { quantity, scale: "log", base: { time: "s", let_through: "A2s", peak: "A" }[quantity] },
];

/** The span of bands and limits, widened a little; log axes. Null where there is nothing. */
export function spanOfScaled(bands, limits = []) {
  const span = spanOf(bands);
  if (!span) return null;
  for (const limit of limits) {
    [limit.current, limit.time].forEach(
      (value, i) => (span[i] = [Math.min(span[i][0], value), Math.max(span[i][1], value)]),
    );
  }
  return span.map(([low, high]) => [Math.log10(low) - 0.12, Math.log10(high) + 0.12]);
}
