// What of a reading is in sight: the bands, limits and findings of the device the strip shows.

import { edgesOf } from "./bands.js";
import { limitsOf } from "./limits.js";

export class Shown {
  /** `index()` is the device's place among the worksheet's. */
  constructor(draft, index) {
    Object.assign(this, { draft, index });
  }

  /** Bands of the device; of the first of a series. */
  get bands() {
    const bands = this.draft.reading?.bands ?? [];
    const key = this.#key(bands.map((band) => band.device));
    return bands.filter((band) => band.device === key);
  }

  /** Bands of the other devices on the sheet, each form once: a series has one band for all. */
  get others() {
    const shown = this.bands;
    const seen = new Set(shown.map(formOf));
    return (this.draft.reading?.bands ?? []).filter((band) => {
      const form = formOf(band);
      if (seen.has(form) || band.base !== shown[0]?.base) return false;
      return seen.add(form);
    });
  }

  get findings() {
    const { findings = [] } = this.draft.state ?? {};
    const key = this.#key(findings.map((each) => each.device));
    return findings.filter((each) => each.device === key);
  }

  get limits() {
    const { limits = [] } = this.draft.state ?? {};
    return limitsOf(limits, this.#key(limits.map((each) => each.device)));
  }

  #key(keys) {
    const device = this.draft.state?.data?.devices?.[this.index()];
    if (!device?.key || keys.includes(device.key)) return device?.key ?? keys[0];
    const rating = device.ratings?.[0];
    const own = rating === undefined ? null : device.key.replace("{rating}", String(rating));
    return keys.includes(own) ? own : keys[0];
  }
}

/** What tells one band's lines from another's: where each begins and ends. */
function formOf(band) {
  return JSON.stringify(
    edgesOf(band).map(([edge, { parts }]) => [edge, parts[0].current[0], parts.at(-1).current.at(-1)]),
  );
}
