// A round glass over the place being pointed at while something is dragged.

import { Canvas } from "./paint.js";
import { el } from "./dom.js";
import { drawPicture } from "./sheet-ink.js";
import { SheetView } from "./sheet-view.js";

const TIMES = 6;
const SIZE = 152;

export class Magnifier {
  constructor(parent, ink) {
    this.node = el("div", { class: "magnifier", hidden: true, "aria-hidden": "true" });
    this.sheet = null;
    const canvas = el("canvas");
    this.node.append(canvas);
    parent.append(this.node);
    this.canvas = new Canvas(canvas, (context) => {
      if (!this.view) return;
      context.fillStyle = ink("sheet-paper");
      context.fillRect(0, 0, SIZE, SIZE);
      drawPicture(context, this.tiles, this.view);
      context.strokeStyle = ink("on-paper");
      context.lineWidth = 1;
      context.beginPath();
      const half = SIZE / 2;
      for (const [dx, dy] of [
        [1, 0],
        [-1, 0],
        [0, 1],
        [0, -1],
      ]) {
        context.moveTo(half + 6 * dx, half + 6 * dy);
        context.lineTo(half + 60 * dx, half + 60 * dy);
      }
      context.stroke();
    });
  }

  /** Show `place` as seen from `view`, beside its pixel on screen. */
  show(tiles, view, place) {
    this.tiles = tiles;
    const [x, y] = view.toScreen(place);
    this.view = Object.assign(new SheetView(view.sheetWidth, view.sheetHeight, view.unitPixels), {
      width: SIZE,
      height: SIZE,
      scale: Math.min(view.most, Math.max(view.scale * TIMES, 4 * view.unitPixels)),
      x: place[0],
      y: place[1],
    });
    const left = x + 28 + SIZE > view.width ? x - 28 - SIZE : x + 28;
    const top = Math.max(4, Math.min(view.height - SIZE - 4, y - SIZE - 20));
    this.node.hidden = false;
    this.node.style.transform = `translate(${left}px, ${top}px)`;
    this.canvas.redraw();
  }

  hide() {
    this.node.hidden = true;
  }
}
