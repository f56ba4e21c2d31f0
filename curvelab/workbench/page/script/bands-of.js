// Stored devices' bands, ready to be drawn together: in their own base if they share it, else in amperes.

import { get, part, query } from "./api.js";
import { inAmperes } from "./bands.js";
import { spanOfScaled, typedAxes } from "./band-pane.js";

const LETTERS = "ABCDEFGH";

/** The bands of a device, KEY or KEY@N, at settings as in "ir=0.8". */
export function bandsOf(key, settings = []) {
  return get(query(`/devices/${part(key)}/bands`, { set: settings }));
}

/** What a BandPane shows of answers to `bandsOf`, one for each of `keys`. */
export function togetherOf(answers, keys, limits = []) {
  const quantities = answers.flatMap((answer) => answer.bands.map(quantityOfBand));
  const quantity = quantities.includes("time") ? "time" : (quantities[0] ?? "time");
  const bases = new Set(answers.map((answer) => answer.base));
  const shared = answers.length === 1 && bases.size === 1 ? [...bases][0] : "A";
  const subjects = answers.map((answer, index) => {
    const bands = answer.bands.filter((band) => quantityOfBand(band) === quantity);
    const perUnit = (band) => band.amperes_per_unit ?? (band.base === "xIn" ? answer.rated_current_a : null);
    return {
      key: keys[index],
      letter: LETTERS[index],
      index,
      colour: `d${index + 1}`,
      bands: shared === "A" ? inAmperes(bands, perUnit).filter((band) => band.base === "A") : bands,
    };
  });
  const drawn = subjects.flatMap((subject) => subject.bands);
  const own = quantity === "time" ? limits.filter((limit) => limit.base === shared) : [];
  return {
    subjects,
    limits: own,
    axes: typedAxes(shared ?? "A", quantity),
    full: spanOfScaled(drawn, own),
    quantity,
    base: shared ?? "A",
  };
}

function quantityOfBand(band) {
  const edge = band.fast ?? band.slow ?? band.mean;
  return ["time", "let_through", "peak"].find((name) => edge?.parts[0]?.[name]) ?? "time";
}
