// The sheet's picture in tiles of 256 pixels: the finest level the zoom needs over the coarsest that is there.

import { part } from "./api.js";

const SIZE = 256;
const KEPT = 420;

export class Tiles {
  constructor(id, sheet, arrived) {
    this.base = `/api/drafts/${part(id)}/tiles`;
    this.page = sheet.page;
    this.arrived = arrived;
    const { width, height, levels, origin, pixel } = sheet.pixels;
    Object.assign(this, { width, height, origin });
    this.perUnit = 1 / pixel[0];
    this.coarsest = levels - 1;
    this.kept = new Map();
  }

  levelFor(pixelsPerUnit) {
    const level = Math.floor(-Math.log2(Math.max(1e-9, pixelsPerUnit / this.perUnit)) + 0.15);
    return Math.min(this.coarsest, Math.max(0, level));
  }

  /** Visit tiles that cover the box [x0, y0, x1, y1] of the sheet: visit(image, [x0, y0, x1, y1] it covers). */
  visit(box, level, visit) {
    const side = SIZE * 2 ** level;
    const [x0, y0, x1, y1] = box.map((each, i) => (each - this.origin[i % 2]) * this.perUnit);
    const columns = [
      Math.max(0, Math.floor(x0 / side)),
      Math.min(Math.ceil(this.width / side) - 1, Math.floor(x1 / side)),
    ];
    const rows = [
      Math.max(0, Math.floor(y0 / side)),
      Math.min(Math.ceil(this.height / side) - 1, Math.floor(y1 / side)),
    ];
    for (let row = rows[0]; row <= rows[1]; row += 1) {
      for (let column = columns[0]; column <= columns[1]; column += 1) {
        const image = this.#tile(level, column, row);
        if (!image) continue;
        const corner = [column * side, row * side];
        const covers = [
          ...corner,
          corner[0] + image.naturalWidth * 2 ** level,
          corner[1] + image.naturalHeight * 2 ** level,
        ];
        visit(
          image,
          covers.map((each, i) => each / this.perUnit + this.origin[i % 2]),
        );
      }
    }
  }

  #tile(level, column, row) {
    const key = `${level}/${column}/${row}`;
    let tile = this.kept.get(key);
    if (tile) {
      this.kept.delete(key);
    } else {
      const image = new Image();
      tile = { image, ready: false };
      image.onload = () => {
        tile.ready = true;
        this.arrived();
      };
      image.onerror = () => setTimeout(() => this.kept.delete(key), 2000);
      image.src = `${this.base}/${key}.png?page=${this.page}`;
    }
    this.kept.set(key, tile);
    if (this.kept.size > KEPT) this.kept.delete(this.kept.keys().next().value);
    return tile.ready ? tile.image : null;
  }
}
