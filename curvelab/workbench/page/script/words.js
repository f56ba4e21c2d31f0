// Numbers as engineers write them, and the words for what a worksheet abbreviates.

const FIGURES = 3;
const MOST_FIGURES = 6;
const SPACE = "\u00a0";
const THIN = "\u202f";

const BASES = { A: "A", xIn: "In", xIr: "Ir", xIsd: "Isd", xIi: "Ii", xIg: "Ig", xIdn: "IΔn" };

export const BASE_NAMES = {
  A: "Current",
  xIn: "Multiple of rated current In",
  xIr: "Multiple of set current Ir",
  xIsd: "Multiple of short-time setting Isd",
  xIi: "Multiple of instantaneous setting Ii",
  xIg: "Multiple of earth-fault setting Ig",
  xIdn: "Multiple of rated residual current IΔn",
};

export const QUANTITY_NAMES = {
  time: "Time",
  let_through: "Let-through energy I²t in A²s",
  peak: "Cut-off current (peak)",
};

export const EDGES = { fast: "Fast", slow: "Slow", mean: "Mean" };

export const MEANINGS = {
  pre_arcing: "pre-arcing",
  operating: "operating (total)",
  unlatching: "unlatching",
  relay_output: "relay output",
  clearing: "clearing (total)",
};

export const ELEMENTS = {
  whole: "whole device",
  overload: "overload",
  delayed: "delayed (short-time)",
  instantaneous: "instantaneous",
  earth: "earth",
  neutral: "neutral",
  override: "override",
  residual: "residual",
};

export const KINDS = {
  fuse: "fuse",
  mcb: "miniature circuit-breaker",
  mccb: "moulded-case circuit-breaker",
  acb: "air circuit-breaker",
  rcd: "residual current device",
  rcbo: "residual current breaker with overcurrent protection",
  relay: "relay",
  switch: "switch",
};

function rounded(value, figures) {
  if (value === 0 || !Number.isFinite(value)) return String(value);
  const digits = Math.max(0, figures - 1 - Math.floor(Math.log10(Math.abs(value)) + 1e-12));
  const text = value.toFixed(Math.min(digits, 20));
  return grouped(text.includes(".") ? text.replace(/\.?0+$/, "") : text);
}

function grouped(text) {
  const [whole, rest] = text.split(".");
  if (whole.replace("-", "").length < 5) return text;
  return whole.replace(/\B(?=(\d{3})+$)/g, THIN) + (rest ? `.${rest}` : "");
}

export function current(value, base = "A", figures = FIGURES) {
  if (base !== "A") return `${rounded(value, figures)}${SPACE}${BASES[base] ?? base}`;
  const size = Math.abs(value);
  if (size >= 1000) return `${rounded(value / 1000, figures)}${SPACE}kA`;
  if (size > 0 && size < 1) return `${rounded(value * 1000, figures)}${SPACE}mA`;
  return `${rounded(value, figures)}${SPACE}A`;
}

export function time(seconds, figures = FIGURES) {
  if (seconds > 0 && seconds < 0.1) return `${rounded(seconds * 1e3, figures)}${SPACE}ms`;
  if (seconds < 120) return `${rounded(seconds, figures)}${SPACE}s`;
  if (seconds < 3600) return `${rounded(seconds / 60, figures)}${SPACE}min`;
  return `${rounded(seconds / 3600, figures)}${SPACE}h`;
}

function energy(value, figures = FIGURES) {
  if (Math.abs(value) < 1e4) return `${rounded(value, figures)}${SPACE}A²s`;
  return `${rounded(value / 1e3, figures)}${SPACE}×${SPACE}10³${SPACE}A²s`;
}

/** A value of the second axis. */
export function quantity(value, name, figures) {
  if (name === "let_through") return energy(value, figures);
  return name === "peak" ? current(value, "A", figures) : time(value, figures);
}

/** A value by its unit: s, A2s, ratio, or a base. */
export function byUnit(value, unit, figures) {
  if (unit === "ratio") return rounded(value, figures ?? FIGURES);
  if (unit === "A2s") return energy(value, figures);
  if (unit === "ohm") return `${rounded(value, figures ?? FIGURES)}${SPACE}Ω`;
  if (unit === "mm2") return `${rounded(value, figures ?? FIGURES)}${SPACE}mm²`;
  return unit === "s" ? time(value, figures) : current(value, unit, figures);
}

/** Figures that show an interval about a value: its half-width in two of them. */
function figuresFor(value, lower, upper) {
  const half = Math.max(Math.abs(upper - value), Math.abs(value - lower));
  if (!(Number.isFinite(half) && half > 0 && value)) return FIGURES;
  return Math.min(Math.max(FIGURES, 2 - Math.floor(Math.log10(half / Math.abs(value)))), MOST_FIGURES);
}

/** A value in three figures and its interval in as many as show it, as two strings. */
export function withInterval(value, interval, write) {
  if (!interval || interval.some((each) => each === null || !Number.isFinite(each))) return [write(value), ""];
  const figures = figuresFor(value, ...interval);
  return [write(value), `${write(interval[0], figures)} to ${write(interval[1], figures)}`];
}

export function percent(share) {
  const value = 100 * share;
  return `${value >= 0 ? "+" : "−"}${Math.abs(value) >= 1e-3 ? rounded(Math.abs(value), FIGURES) : "0"}${SPACE}%`;
}

/** A number a person typed, with or without its unit, as a number in `unit`; null where it is no such thing. */
export function typedNumber(text) {
  const value = Number(
    text
      .trim()
      .replace(/[\s\u00a0\u202f]/g, "")
      .replace(",", "."),
  );
  return text.trim() && Number.isFinite(value) ? value : null;
}

/** A half-width relative to its value, in two figures: ±0.12 %. */
export function plusMinus(share) {
  const value = 100 * Math.abs(share);
  return `±${value < 0.01 ? "0.01" : rounded(value, 2)}${SPACE}%`;
}

export function count(number, one, many = `${one}s`) {
  return `${number}${SPACE}${number === 1 ? one : many}`;
}

/** What the process writes in plain letters, as engineers write it: 5 xIn is 5 In, A2s is A²s. */
export function plain(text) {
  const squared = text
    .replace(/\bA2s\b/g, "A²s")
    .replace(/\bk2S2\b/g, "k²S²")
    .replace(/\bI2t\b/g, "I²t")
    .replace(/ x 10\^3/g, " × 10³");
  return squared.replace(/\bxI(n|r|sd|i|g|dn)\b/g, (_, name) => (name === "dn" ? "IΔn" : `I${name}`));
}

/** A moment as a person writes it, short if it is today. */
export function moment(iso) {
  const when = new Date(iso);
  if (Number.isNaN(when.getTime())) return iso ?? "";
  const clock = `${String(when.getHours()).padStart(2, "0")}:${String(when.getMinutes()).padStart(2, "0")}`;
  if (when.toDateString() === new Date().toDateString()) return `today ${clock}`;
  const day = `${when.getFullYear()}-${String(when.getMonth() + 1).padStart(2, "0")}-${String(when.getDate()).padStart(2, "0")}`;
  return `${day} ${clock}`;
}
