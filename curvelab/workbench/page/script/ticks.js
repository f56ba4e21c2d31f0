// Ticks of an axis from a low to a high scaled value: decades and what lies between, or even steps when zoomed in.

import { byUnit, current, quantity } from "./words.js";

const ROOMY = 3.2;
const CLOSE = 0.75;

/** [{ at, value, rank, label }]: rank 0 is a decade, 1 labelled between, 2 a plain line. */
export function ticksOf(axis, low, high, pixels) {
  const ticks = axis.scale !== "log" || high - low < CLOSE ? even(axis, low, high, pixels) : decades(low, high, pixels);
  return ticks.map((tick) => ({ ...tick, label: tick.rank < 2 ? labelOf(axis, tick.value) : "" }));
}

function decades(low, high, pixels) {
  const found = [];
  const span = high - low;
  const every = Math.max(1, Math.ceil((span * 34) / pixels));
  for (let power = Math.floor(low); power <= Math.ceil(high); power += 1) {
    for (let step = 1; step <= 9; step += 1) {
      const at = power + Math.log10(step);
      if (at < low - 1e-9 || at > high + 1e-9) continue;
      const between = span <= ROOMY && (step === 2 || step === 5) && (pixels / span) * 0.3 > 30;
      const rank = step === 1 ? (power % every === 0 ? 0 : 2) : between ? 1 : 2;
      found.push({ at, value: step * 10 ** power, rank });
    }
  }
  return found;
}

function even(axis, low, high, pixels) {
  const log = axis.scale === "log";
  const [from, to] = log ? [10 ** low, 10 ** high] : [low, high];
  const rough = (to - from) / Math.max(2, pixels / 70);
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].map((each) => each * power).find((each) => each >= rough);
  const found = [];
  for (let k = Math.ceil(from / step); k * step <= to * (1 + 1e-12); k += 1) {
    const value = Number((k * step).toPrecision(12));
    if (value > 0 || !log) found.push({ at: log ? Math.log10(value) : value, value, rank: 0 });
  }
  return found;
}

const HUMAN_TIMES = [
  [60, "1 min"],
  [300, "5 min"],
  [1200, "20 min"],
  [3600, "1 h"],
  [7200, "2 h"],
  [14400, "4 h"],
  [86400, "1 d"],
];

/** Long times as people say them, within a range of seconds. */
export const humanTimes = (low, high) => HUMAN_TIMES.filter(([seconds]) => seconds >= low && seconds <= high);

/** 10⁴, 2·10⁴: the axis's name says of what. */
function powerOfTen(value) {
  const power = Math.floor(Math.log10(value) + 1e-9);
  const step = Number((value / 10 ** power).toPrecision(4));
  const raised = [...String(power)].map((digit) => (digit === "-" ? "⁻" : "⁰¹²³⁴⁵⁶⁷⁸⁹"[digit])).join("");
  return step === 1 ? `10${raised}` : `${step}·10${raised}`;
}

function labelOf(axis, value) {
  const figures = 6;
  if (axis.quantity === "time")
    return value > 0.95
      ? `${byUnit(value, "ratio", figures)}\u00a0s`
      : `${byUnit(value * 1000, "ratio", figures)}\u00a0ms`;
  if (axis.quantity === "let_through") return powerOfTen(value);
  if (axis.quantity !== "current") return quantity(value, axis.quantity, figures);
  return axis.base === "A" ? current(value, "A", figures) : current(value, axis.base, figures).split("\u00a0")[0];
}
