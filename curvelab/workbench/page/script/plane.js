// The map between a place on the sheet and (current, value), as the reading gives it: projective, then a warp.

const STEPS = 30;

export class Plane {
  constructor(axes) {
    const name = ["time", "let_through", "peak"].find((each) => axes[each]);
    this.quantity = name;
    this.current = axes.current;
    this.value = axes[name];
    this.frame = axes.frame;
    this.map = axes.map;
    this.covariance = axes.covariance?.matrix ?? null;
  }

  get base() {
    return this.current.base;
  }

  #normal([x, y]) {
    const { centre, reach } = this.map;
    return [(x - centre[0]) / reach, (y - centre[1]) / reach];
  }

  /** Scaled (log10 on a log axis) current and value of a place. */
  scaled(place) {
    const [X, Y] = this.#normal(place);
    const { projective: h, powers, warp } = this.map;
    const below = 1 + h[6] * X + h[7] * Y;
    const pair = [(h[0] + h[1] * X + h[2] * Y) / below, (h[3] + h[4] * X + h[5] * Y) / below];
    powers.forEach(([i, j], k) => {
      const term = X ** i * Y ** j;
      pair[0] += warp[0][k] * term;
      pair[1] += warp[1][k] * term;
    });
    return pair;
  }

  #jacobian(place) {
    const step = this.map.reach * 1e-5;
    const [right, left] = [this.scaled([place[0] + step, place[1]]), this.scaled([place[0] - step, place[1]])];
    const [down, up] = [this.scaled([place[0], place[1] + step]), this.scaled([place[0], place[1] - step])];
    return [0, 1].map((i) => [(right[i] - left[i]) / (2 * step), (down[i] - up[i]) / (2 * step)]);
  }

  /** The place of a scaled pair by Newton's method; null where there is none. */
  placeOfScaled(target) {
    let place = [...this.map.centre];
    for (let step = 0; step < STEPS; step += 1) {
      const [[a, b], [c, d]] = this.#jacobian(place);
      const now = this.scaled(place);
      const [u, v] = [target[0] - now[0], target[1] - now[1]];
      const determinant = a * d - b * c;
      if (!Number.isFinite(determinant) || determinant === 0) return null;
      const move = [(d * u - b * v) / determinant, (a * v - c * u) / determinant];
      place = [place[0] + move[0], place[1] + move[1]];
      if (Math.max(Math.abs(move[0]), Math.abs(move[1])) < 1e-7 * this.map.reach) return place;
    }
    return null;
  }

  scale(pair) {
    return [scaledBy(this.current, pair[0]), scaledBy(this.value, pair[1])];
  }

  unscale(pair) {
    return [unscaledBy(this.current, pair[0]), unscaledBy(this.value, pair[1])];
  }

  values(place) {
    return this.unscale(this.scaled(place));
  }

  place(current, value) {
    return this.placeOfScaled(this.scale([current, value]));
  }

  /** Standard deviations of the scaled pair at a place that the calibration causes; null where unknown. */
  deviation(place) {
    if (!this.covariance?.length) return null;
    const [X, Y] = this.#normal(place);
    const { projective: h, powers } = this.map;
    const below = 1 + h[6] * X + h[7] * Y;
    const terms = powers.map(([i, j]) => X ** i * Y ** j);
    return [0, 1].map((i) => {
      const above = h[3 * i] + h[3 * i + 1] * X + h[3 * i + 2] * Y;
      const slope = new Array(8 + 2 * terms.length).fill(0);
      slope[3 * i] = 1 / below;
      slope[3 * i + 1] = X / below;
      slope[3 * i + 2] = Y / below;
      slope[6] = (-above * X) / below ** 2;
      slope[7] = (-above * Y) / below ** 2;
      terms.forEach((term, k) => (slope[8 + i * terms.length + k] = term));
      let sum = 0;
      this.covariance.forEach((row, m) => row.forEach((each, n) => (sum += slope[m] * (each ?? 0) * slope[n])));
      return Math.sqrt(Math.max(0, sum));
    });
  }

  /** Scaled [lowest, highest] of both axes over the plot. */
  get extent() {
    const [x0, y0, x1, y1] = this.frame;
    const corners = [
      [x0, y0],
      [x1, y0],
      [x0, y1],
      [x1, y1],
    ].map((place) => this.scaled(place));
    return [0, 1].map((i) => [
      Math.min(...corners.map((each) => each[i])),
      Math.max(...corners.map((each) => each[i])),
    ]);
  }

  inside([x, y], margin = 0) {
    const [x0, y0, x1, y1] = this.frame;
    return x >= x0 - margin && x <= x1 + margin && y >= y0 - margin && y <= y1 + margin;
  }
}

function scaledBy(axis, value) {
  return axis.scale === "log" ? Math.log10(value) : value;
}

function unscaledBy(axis, value) {
  return axis.scale === "log" ? 10 ** value : value;
}
