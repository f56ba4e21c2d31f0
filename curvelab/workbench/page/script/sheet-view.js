// Where the sheet stands in its pane: pixels on screen a unit of the sheet, and the place in the pane's middle.

const MOST = 64;

export class SheetView {
  constructor(width, height, unitPixels) {
    Object.assign(this, { sheetWidth: width, sheetHeight: height, unitPixels, scale: 1, x: width / 2, y: height / 2 });
    this.width = 0;
    this.height = 0;
  }

  get least() {
    return 0.5 * Math.min(this.width / this.sheetWidth, this.height / this.sheetHeight);
  }

  get most() {
    return MOST * this.unitPixels;
  }

  toScreen([x, y]) {
    return [(x - this.x) * this.scale + this.width / 2, (y - this.y) * this.scale + this.height / 2];
  }

  toSheet([x, y]) {
    return [(x - this.width / 2) / this.scale + this.x, (y - this.height / 2) / this.scale + this.y];
  }

  get box() {
    return [...this.toSheet([0, 0]), ...this.toSheet([this.width, this.height])];
  }

  /** Show a box of the sheet whole, with a share of the pane left free about it. */
  show([x0, y0, x1, y1], free = 0.04) {
    this.x = (x0 + x1) / 2;
    this.y = (y0 + y1) / 2;
    const share = 1 - 2 * free;
    this.scale = Math.min(
      (this.width * share) / Math.max(1e-6, x1 - x0),
      (this.height * share) / Math.max(1e-6, y1 - y0),
    );
    this.#hold();
  }

  zoom(factor, [px, py] = [this.width / 2, this.height / 2]) {
    const [x, y] = this.toSheet([px, py]);
    this.scale = Math.min(this.most, Math.max(this.least, this.scale * factor));
    this.x = x - (px - this.width / 2) / this.scale;
    this.y = y - (py - this.height / 2) / this.scale;
    this.#hold();
  }

  pan(dx, dy) {
    this.x -= dx / this.scale;
    this.y -= dy / this.scale;
    this.#hold();
  }

  /** The sheet never leaves the pane. */
  #hold() {
    this.scale = Math.min(this.most, Math.max(this.least, this.scale));
    this.x = Math.min(this.sheetWidth, Math.max(0, this.x));
    this.y = Math.min(this.sheetHeight, Math.max(0, this.y));
  }
}
