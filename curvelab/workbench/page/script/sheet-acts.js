// What a person says on the sheet: a line passes here, not here, leave this out, this place has that value.

import { hush, said } from "./say.js";

const NOT_HERE_PX = 9;

export class SheetActs {
  /** `pane` gives view, draft, desk, near(place), showBox(box), saying. */
  constructor(pane) {
    this.pane = pane;
    this.waiting = null;
    this.firstCorner = null;
  }

  /** Which curve a click here is about: the one chosen, else the one under the pointer, else none yet. */
  meant(place) {
    return this.pane.desk.chosen ?? this.pane.near(place)?.index ?? null;
  }

  #place(pixel) {
    return this.pane.view.toSheet(pixel).map((each) => Number(each.toFixed(2)));
  }

  passes(pixel) {
    const at = this.#place(pixel);
    if (this.waiting) return this.#answer(at);
    if (!this.pane.draft.plane && !this.pane.draft.state.data?.curves?.length) {
      return said(
        "The axes are not known yet. Double-click a number beside an axis and say its value; two on each axis are enough.",
      );
    }
    if (this.pane.draft.plane && !this.pane.draft.plane.inside(at, 3 / this.pane.view.scale)) return undefined;
    return this.pane.draft.change({ kind: "passes", curve: this.meant(at), at });
  }

  not(pixel) {
    const [x, y] = this.#place(pixel);
    const half = NOT_HERE_PX / this.pane.view.scale;
    const box = [x - half, y - half, x + half, y + half].map((each) => Number(each.toFixed(2)));
    return this.pane.draft.change({ kind: "avoid", curve: this.meant([x, y]), box });
  }

  boxing(from, to) {
    this.pane.showBox(from ? this.#boxOf(from, to) : null);
  }

  leaveOut(from, to) {
    const box = this.#boxOf(from, to);
    this.pane.showBox(null);
    return this.pane.draft.change({ kind: "avoid", curve: this.pane.desk.chosen, box });
  }

  /** The first and then the second corner of a box, by keys. */
  corner(pixel) {
    if (!this.firstCorner) {
      this.firstCorner = this.pane.view.toSheet(pixel);
      return said("First corner set. Move the cross to the other corner and press B again.");
    }
    const from = this.pane.view.toScreen(this.firstCorner);
    this.firstCorner = null;
    return this.leaveOut(from, pixel);
  }

  #boxOf(from, to) {
    const [a, b] = [this.#place(from), this.#place(to)];
    return [Math.min(a[0], b[0]), Math.min(a[1], b[1]), Math.max(a[0], b[0]), Math.max(a[1], b[1])];
  }

  say(pixel) {
    const at = this.#place(pixel);
    if (this.pane.draft.plane?.inside(at, -3 / this.pane.view.scale) && this.pane.desk.cursor.from === "sheet") return;
    this.pane.saying.ask({ axis: this.#axisBeside(at), index: null, at, value: null });
  }

  #axisBeside([x, y]) {
    const second = this.pane.draft.plane?.quantity ?? "time";
    const [x0, y0, , y1] = this.pane.draft.plane?.frame ?? [0, 0, 0, 0.8 * this.pane.view.sheetHeight];
    return y > y1 || y < y0 || x > x0 ? "current" : second;
  }

  /** The next click answers; resolves to its place, or null when given up. */
  nextPlace() {
    this.waiting?.(null);
    said("Click the place on the sheet, or press Esc.");
    this.pane.canvasNode.focus({ preventScroll: true });
    this.pane.node.classList.add("waiting");
    return new Promise((done) => (this.waiting = done));
  }

  #answer(at) {
    const done = this.waiting;
    this.waiting = null;
    this.pane.node.classList.remove("waiting");
    hush();
    done(at);
  }

  giveUp() {
    if (this.waiting) this.#answer(null);
    this.firstCorner = null;
    this.pane.saying.close();
  }
}
