// The sheet's pane: the paper as it is, hairlines over it, and direct manipulation of what was read from it.

import { el } from "./dom.js";
import { gesturesOn } from "./gestures.js";
import { Magnifier } from "./magnifier.js";
import { Marks } from "./marks.js";
import { Canvas, inks } from "./paint.js";
import { drawCross } from "./paper.js";
import { Saying } from "./saying.js";
import { SheetActs } from "./sheet-acts.js";
import { drawBox, drawGrid, drawOpen, drawPicture, drawTold, drawTraces, gridOf, nearestCurve } from "./sheet-ink.js";
import { SheetView } from "./sheet-view.js";
import { Tiles } from "./tiles.js";

const HELP =
  "The sheet. Arrow keys move the cross, Enter says that the line passes there, Shift and Enter that it does not. Plus and minus zoom, zero shows the whole sheet, B twice leaves out a box, V says a value.";

export class SheetPane {
  /** `desk` gives draft, cursor, chosen (a worksheet's curve or null), opened (an open entry or null), bare (paper alone). */
  constructor(desk) {
    this.desk = desk;
    this.draft = desk.draft;
    this.canvasNode = el("canvas", {
      tabindex: 0,
      role: "application",
      "aria-roledescription": "sheet",
      "aria-label": HELP,
      "data-focus": "sheet",
    });
    this.node = el("section", { class: "pane sheet-pane", "aria-label": "Sheet" }, this.canvasNode);
    this.ink = inks(this.canvasNode);
    this.canvas = new Canvas(this.canvasNode, (context, ...size) => this.#draw(context, ...size));
    this.canvas.onsize = (width, height) => this.#sized(width, height);
    this.marks = new Marks(this);
    this.saying = new Saying(this);
    this.node.append(this.marks.node, this.saying.node);
    this.magnifier = new Magnifier(this.node, this.ink);
    this.view = null;
    this.box = null;
    matchMedia("(prefers-color-scheme: dark)").addEventListener("change", () => (this.ink = inks(this.canvasNode)));
    this.acts = new SheetActs(this);
    gesturesOn(this.canvasNode, this, this.acts);
    desk.cursor.addEventListener("move", () => this.canvas.redraw());
  }

  update() {
    const { sheet, id } = this.draft.state;
    if (!sheet) return;
    const of = `${sheet.sha256}-${sheet.page}-${sheet.width}`;
    if (of !== this.of) {
      this.of = of;
      this.tiles = new Tiles(id, sheet, () => this.#arrived());
      this.view = new SheetView(sheet.width, sheet.height, this.tiles.perUnit);
      this.#sized(this.canvas.width, this.canvas.height);
    }
    if (this.draft.reading !== this.read) {
      this.read = this.draft.reading;
      this.grid = this.draft.plane ? gridOf(this.draft.plane) : [];
    }
    this.marks.update();
    this.canvas.redraw();
  }

  /** A tile came; with the paper laid bare the twin shows it too. */
  #arrived() {
    this.canvas.redraw();
    if (this.desk.bare) this.desk.twin.canvas.redraw();
  }

  #sized(width, height) {
    if (!this.view || !width) return;
    const first = !this.view.width;
    Object.assign(this.view, { width, height });
    if (first) this.desk.wantedView ? Object.assign(this.view, this.desk.wantedView) : this.whole();
    this.moved();
  }

  #draw(context, width, height) {
    const { ink, view } = this;
    if (!view || !this.tiles) return;
    context.fillStyle = ink("sheet-ground");
    context.fillRect(0, 0, width, height);
    const [left, top] = view.toScreen(this.tiles.origin);
    const size = [view.sheetWidth * view.scale, view.sheetHeight * view.scale];
    context.fillStyle = ink("sheet-paper");
    context.fillRect(left, top, ...size);
    drawPicture(context, this.tiles, view);
    const dim = Number(ink("sheet-dim"));
    if (dim) {
      context.fillStyle = `rgba(20, 24, 26, ${dim})`;
      context.fillRect(left, top, ...size);
    }
    if (!this.desk.bare) this.#drawRead(context);
    if (this.box) drawBox(context, view, this.box, ink);
    const { cursor } = this.desk;
    if (cursor.place && this.draft.plane && !this.desk.bare) {
      drawCross(context, view.toScreen(cursor.place), { left: 0, top: 0, wide: width, high: height }, ink("on-paper"));
    }
  }

  #drawRead(context) {
    const { ink, view, desk } = this;
    drawGrid(context, view, this.grid ?? [], ink);
    drawTold(context, view, this.draft.state.data?.curves ?? [], ink, desk.chosen);
    drawTraces(context, view, this.draft.reading?.curves ?? [], ink, desk.chosen);
    drawOpen(context, view, desk.opened, ink);
  }

  moved() {
    this.marks.place();
    this.saying.place();
    this.canvas.redraw();
    this.desk.sheetMoved?.();
  }

  // What the hand does. ------------------------------------------------------------------------------------------

  pointed(pixel, not) {
    if (!this.view) return;
    const place = this.view.toSheet(pixel);
    this.desk.cursor.atPlace(place, "sheet", this.near(place));
    this.canvasNode.classList.toggle("not", not);
  }

  left() {
    if (document.activeElement !== this.canvasNode) this.desk.cursor.clear();
  }

  panned(dx, dy) {
    this.view.pan(dx, dy);
    this.moved();
  }

  zoomed(factor, pixel) {
    this.view.zoom(factor, pixel);
    this.moved();
  }

  whole() {
    this.view.show([0, 0, this.view.sheetWidth, this.view.sheetHeight], 0.02);
    this.moved();
  }

  /** Bring a place into the middle, near enough to see it. */
  goTo(place) {
    const { view } = this;
    if (!view?.width) return;
    const near = Math.max(view.scale, 2 * view.unitPixels);
    const from = { x: view.x, y: view.y, scale: view.scale };
    const steps = matchMedia("(prefers-reduced-motion: reduce)").matches ? 1 : 8;
    let step = 0;
    const glide = () => {
      step += 1;
      const share = step / steps;
      view.x = from.x + (place[0] - from.x) * share;
      view.y = from.y + (place[1] - from.y) * share;
      view.scale = from.scale * (near / from.scale) ** share;
      this.moved();
      if (step < steps) requestAnimationFrame(glide);
    };
    glide();
  }

  showBox(box) {
    this.box = box;
    this.canvas.redraw();
  }

  askMark(mark) {
    this.saying.ask(mark);
  }

  glass(place) {
    if (place) this.magnifier.show(this.tiles, this.view, place);
    else this.magnifier.hide();
  }

  cross() {
    const { cursor } = this.desk;
    return cursor.place ? this.view.toScreen(cursor.place) : [this.view.width / 2, this.view.height / 2];
  }

  stepped([dx, dy]) {
    const [x, y] = this.cross();
    const at = [Math.min(this.view.width, Math.max(0, x + dx)), Math.min(this.view.height, Math.max(0, y + dy))];
    if (at[0] !== x + dx || at[1] !== y + dy) this.panned(at[0] - x - dx, at[1] - y - dy);
    const place = this.view.toSheet(at);
    this.desk.cursor.atPlace(place, "keys", this.near(place));
  }

  near(place) {
    return nearestCurve(this.view, this.draft.reading?.curves ?? [], place);
  }
}
