// Canvases that fill their pane at the screen's own resolution, and the inks of the style sheet.

export const LINE_WIDTH = { fast: 1, slow: 2.4, mean: 1.5 };
export const LINE_DASH = { fast: [], slow: [], mean: [9, 4] };

/** The inks as the style sheet has them now; `name` is that of a custom property without its dashes. */
export function inks(node) {
  const style = getComputedStyle(node);
  const cache = new Map();
  return (name) => {
    if (!cache.has(name)) cache.set(name, style.getPropertyValue(`--${name}`).trim());
    return cache.get(name);
  };
}

export class Canvas {
  /** `draw(context, width, height)` in CSS pixels, called at most once a frame after `redraw()`. */
  constructor(canvas, draw) {
    this.canvas = canvas;
    this.draw = draw;
    this.context = canvas.getContext("2d");
    this.width = 0;
    this.height = 0;
    this.ratio = 1;
    this.due = 0;
    new ResizeObserver(() => this.#measure()).observe(canvas);
    matchMedia("(prefers-color-scheme: dark)").addEventListener("change", () => this.redraw());
  }

  #measure() {
    const box = this.canvas.getBoundingClientRect();
    const ratio = window.devicePixelRatio || 1;
    if (box.width === this.width && box.height === this.height && ratio === this.ratio) return;
    Object.assign(this, { width: box.width, height: box.height, ratio });
    this.canvas.width = Math.round(box.width * ratio);
    this.canvas.height = Math.round(box.height * ratio);
    this.onsize?.(this.width, this.height);
    this.#now();
  }

  redraw() {
    if (!this.due) this.due = requestAnimationFrame(() => this.#now());
  }

  #now() {
    cancelAnimationFrame(this.due);
    this.due = 0;
    if (!this.width || !this.height) return;
    this.context.setTransform(this.ratio, 0, 0, this.ratio, 0, 0);
    this.context.clearRect(0, 0, this.width, this.height);
    this.draw(this.context, this.width, this.height);
  }
}

/** How much larger than at the narrowest window letters are; canvases follow the page's type. */
export const typeScale = () => parseFloat(getComputedStyle(document.documentElement).fontSize) / 14.8;

/** A line through points [[x, y], ...]. */
export function stroke(context, points, { colour, width = 1, dash = [], alpha = 1 }) {
  if (points.length < 2) return;
  context.save();
  context.globalAlpha = alpha;
  context.strokeStyle = colour;
  context.lineWidth = width;
  context.lineJoin = "round";
  context.setLineDash(dash);
  context.beginPath();
  points.forEach(([x, y], k) => (k ? context.lineTo(x, y) : context.moveTo(x, y)));
  context.stroke();
  context.restore();
}

/** A straight line from (x0, y0) to (x1, y1). */
export function line(context, [x0, y0, x1, y1], look) {
  stroke(
    context,
    [
      [x0, y0],
      [x1, y1],
    ],
    look,
  );
}

export function area(context, points, { colour, alpha = 1 }) {
  if (points.length < 3) return;
  context.save();
  context.globalAlpha = alpha;
  context.fillStyle = colour;
  context.beginPath();
  points.forEach(([x, y], k) => (k ? context.lineTo(x, y) : context.moveTo(x, y)));
  context.closePath();
  context.fill();
  context.restore();
}

export function words(context, text, x, y, { colour, size = 12, align = "left", base = "alphabetic", ground = null }) {
  context.save();
  context.font = `${size}px ${getComputedStyle(context.canvas).fontFamily}`;
  context.textAlign = align;
  context.textBaseline = base;
  if (ground) {
    const wide = context.measureText(text).width;
    const left = align === "right" ? x - wide : align === "center" ? x - wide / 2 : x;
    const top = base === "top" ? y : base === "middle" ? y - size / 2 : base === "bottom" ? y - size : y - size * 0.8;
    context.globalAlpha = 0.88;
    context.fillStyle = ground;
    context.fillRect(left - 2, top - 1, wide + 4, size + 2);
    context.globalAlpha = 1;
  }
  context.fillStyle = colour;
  context.fillText(text, x, y);
  context.restore();
}
