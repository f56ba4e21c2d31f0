// The views move together: what one shows, the other shows.

export class Together {
  constructor(draft, sheet, twin) {
    Object.assign(this, { draft, sheet, twin });
    this.leading = false;
  }

  /** The twin shows the part of the plot that the sheet's pane shows. */
  sheetMoved() {
    const { plane } = this.draft;
    if (!plane || this.leading) return;
    const [x0, y0, x1, y1] = this.sheet.view.box;
    const [fx0, fy0, fx1, fy1] = plane.frame;
    const seen = [Math.max(x0, fx0), Math.max(y0, fy0), Math.min(x1, fx1), Math.min(y1, fy1)];
    if (seen[2] - seen[0] < 1e-6 || seen[3] - seen[1] < 1e-6) return;
    const whole = x0 <= fx0 && y0 <= fy0 && x1 >= fx1 && y1 >= fy1;
    const corners = [0, 2].flatMap((i) => [1, 3].map((j) => plane.scaled([seen[i], seen[j]])));
    this.twin.follow(whole ? null : spanOf(corners));
  }

  /** The sheet's pane shows the part of the plot that the twin shows. */
  twinMoved(window, full) {
    const { plane } = this.draft;
    if (!plane || !this.sheet.view?.width) return;
    const whole = window.every(([low, high], i) => high - low > 0.999 * (full[i][1] - full[i][0]));
    const corners = window[0].flatMap((u) => window[1].map((v) => plane.placeOfScaled([u, v]))).filter(Boolean);
    if (!corners.length) return;
    const [[x0, x1], [y0, y1]] = spanOf(corners);
    this.leading = true;
    if (whole) this.sheet.whole();
    else {
      this.sheet.view.show([x0, y0, x1, y1], 0);
      this.sheet.moved();
    }
    this.leading = false;
  }
}

/** [[lowest, highest] of the first, of the second] coordinates. */
function spanOf(points) {
  return [0, 1].map((i) => points.map((each) => each[i])).map((values) => [Math.min(...values), Math.max(...values)]);
}
