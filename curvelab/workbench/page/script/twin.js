// The twin: the sheet's bands on exact axes. Its window moves with the sheet's, its cross with the sheet's pointer.

import { BandPane, spanOfScaled, typedAxes } from "./band-pane.js";
import { clipped } from "./paper.js";
import { drawPaperBelow } from "./underlay.js";

export class TwinPane extends BandPane {
  /** `desk` gives draft, cursor, what is shown, bare; `desk.together` hears of a new window. */
  constructor(desk) {
    super("The band on exact axes.");
    this.desk = desk;
    this.canvasNode.dataset.focus = "twin";
    this.onwindow = (window) => desk.together.twinMoved(window, this.full);
    desk.cursor.addEventListener("move", () => this.canvas.redraw());
  }

  update() {
    const { plane, reading } = this.desk.draft;
    const bands = this.desk.shown.bands;
    const limits = this.desk.shown.limits;
    const axes = plane
      ? [axisOf("current", plane.current), axisOf(plane.quantity, plane.value)]
      : typedAxes(bands[0]?.base ?? "A");
    const subjects = [
      { bands: this.desk.shown.others, colour: "quiet", faint: true, index: 0 },
      { bands, colour: "ink", index: 0 },
    ];
    this.show({ subjects, limits, axes, full: plane ? plane.extent : spanOfScaled(bands, limits) });
    this.empty.textContent = this.full
      ? ""
      : reading
        ? "There is no curve to draw."
        : "The band appears here as soon as the axes are known.";
  }

  drawWithin(context, frame) {
    const { desk } = this;
    if (!desk.bare || !desk.draft.plane) return super.drawWithin(context, frame);
    return clipped(context, frame, () => drawPaperBelow(context, frame, desk.draft.plane, desk.sheet, this.ink));
  }

  values() {
    return this.desk.cursor.values;
  }

  moveTo(values, from = "twin") {
    if (values) this.desk.cursor.atValues(values, from);
    else this.desk.cursor.clear();
  }

  /** Follow the sheet: show the part of the plot that the sheet's pane shows; null for all of it. */
  follow(window) {
    if (!this.full) return;
    this.window = window ?? this.full.map((each) => [...each]);
    this.canvas.redraw();
  }
}

const axisOf = (quantity, axis) => ({ quantity, scale: axis.scale, base: axis.base });
