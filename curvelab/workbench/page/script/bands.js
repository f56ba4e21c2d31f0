// Answers of a band's edges: between its points a straight line in log current and log value, nothing beyond them.

const EDGE_ORDER = ["fast", "slow", "mean"];
const NORMAL_95 = 1.959964;

export const quantityOf = (part) => ["time", "let_through", "peak"].find((name) => part[name]) ?? "time";

export function edgesOf(band) {
  return EDGE_ORDER.filter((edge) => band[edge]?.parts?.length).map((edge) => [edge, band[edge]]);
}

/** The edge's value at a current: { value, interval, status }, or null where it does not reach. */
export function valueAt(edge, current, side) {
  const logCurrent = Math.log(current);
  const found = edge.parts.map((part) => within(part, logCurrent, side)).filter(Boolean);
  if (found.length) return found.reduce((one, other) => ((side === "fast") === other.value < one.value ? other : one));
  const first = edge.parts[0];
  const values = first[quantityOf(first)];
  if (edge.leaves_top && current < first.current[0]) return { value: values[0], interval: null, status: "at_least" };
  return null;
}

function within(part, logCurrent, side) {
  const { current } = part;
  const last = current.length - 1;
  if (logCurrent < Math.log(current[0]) - 1e-12 || logCurrent > Math.log(current[last]) + 1e-12) return null;
  const name = quantityOf(part);
  const values = part[name];
  const deviations = part[`sd_${name}`];
  const answers = [];
  for (let k = firstAtLeast(current, Math.exp(logCurrent)); k <= last; k += 1) {
    const j = Math.max(1, k);
    const [from, to] = [Math.log(current[j - 1]), Math.log(current[j])];
    if (from > logCurrent + 1e-12 && answers.length) break;
    const share = to > from ? Math.min(1, Math.max(0, (logCurrent - from) / (to - from))) : side === "fast" ? 1 : 0;
    const value = Math.exp(Math.log(values[j - 1]) * (1 - share) + Math.log(values[j]) * share);
    const [before, after] = [deviations[j - 1], deviations[j]];
    const sd = before === null || after === null ? null : before * (1 - share) + after * share;
    answers.push({ value, sd });
    if (current[j] > Math.exp(logCurrent)) break;
  }
  if (!answers.length) return null;
  const chosen = answers.reduce((one, other) => ((side === "fast") === other.value < one.value ? other : one));
  const spread = chosen.sd === null ? null : Math.exp(NORMAL_95 * chosen.sd);
  return {
    value: chosen.value,
    interval: spread ? [chosen.value / spread, chosen.value * spread] : null,
    status: "value",
  };
}

/** Index of the first element that is at least `value`. */
function firstAtLeast(sorted, value) {
  let [low, high] = [0, sorted.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle] < value * (1 - 1e-12)) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Lowest and highest current and value over bands: [[lo, hi], [lo, hi]], or null. */
export function spanOf(bands) {
  const span = [
    [Infinity, -Infinity],
    [Infinity, -Infinity],
  ];
  for (const band of bands) {
    for (const [, edge] of edgesOf(band)) {
      for (const part of edge.parts) {
        [part.current, part[quantityOf(part)]].forEach((values, i) => {
          for (const value of values) {
            if (value === null) continue;
            span[i][0] = Math.min(span[i][0], value);
            span[i][1] = Math.max(span[i][1], value);
          }
        });
      }
    }
  }
  return span[0][0] < Infinity ? span : null;
}

/** Bands with currents in amperes, where the rated current makes that possible; others as they are. */
export function inAmperes(bands, perUnit) {
  return bands.map((band) => {
    const factor = band.base === "A" ? 1 : perUnit(band);
    if (!factor) return band;
    const scaled = (edge) =>
      edge && {
        ...edge,
        parts: edge.parts.map((part) => ({ ...part, current: part.current.map((value) => value * factor) })),
      };
    return { ...band, base: "A", fast: scaled(band.fast), slow: scaled(band.slow), mean: scaled(band.mean) };
  });
}
