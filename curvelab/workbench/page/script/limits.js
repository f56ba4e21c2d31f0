// Limits of a standard as they stand on a plot: a short bracket whose open side is the permitted side.

import { plain } from "./words.js";

const SETTLED = ["meets", "not covered"];

/** The limits of one device, as the process places them, with what is written beside each. */
export function limitsOf(limits, device) {
  return limits
    .filter((limit) => limit.device === device)
    .map((limit) => {
      const settled = SETTLED.includes(limit.outcome) || limit.advisory;
      const words = plain(limit.multiple);
      return { ...limit, settled, words: settled ? words : `${words}, ${limit.outcome}` };
    });
}

export const isOf = (limit, finding) =>
  finding !== null &&
  limit.rule === finding.rule &&
  limit.device === finding.device &&
  limit.side === finding.permitted &&
  limit.text === finding.requirement;

/** The bracket's corners and where its words go, in pixels about its place. */
export function bracketOf({ of, side }, size = 7) {
  const down = [
    [-size, size * 0.6],
    [-size, 0],
    [size, 0],
    [size, size * 0.6],
  ];
  const turns = {
    current: { at_most: ([x, y]) => [-y, x], at_least: ([x, y]) => [y, x] },
    time: { at_most: (corner) => corner, at_least: ([x, y]) => [x, -y] },
  };
  const besides = {
    current: { at_most: [6, 0, "left", "middle"], at_least: [-6, 0, "right", "middle"] },
    time: { at_most: [0, -5, "center", "bottom"], at_least: [0, 5, "center", "top"] },
  };
  return { corners: down.map(turns[of][side]), beside: besides[of][side] };
}
