// Limits on exact axes: brackets with their words, which keep apart.

import { bracketOf, isOf } from "./limits.js";
import { stroke, words } from "./paint.js";

export function drawLimits(context, frame, limits, ink, chosen = null) {
  const said = [];
  for (const limit of limits) {
    const at = frame.pixel(limit.current, limit.time);
    if (!frame.contains(at)) continue;
    const { corners, beside } = bracketOf(limit);
    const colour = limit.settled ? ink("graphite") : ink("open");
    const width = isOf(limit, chosen) ? 2.8 : 1.4;
    stroke(
      context,
      corners.map(([x, y]) => [at[0] + x, at[1] + y]),
      { colour, width },
    );
    if (said.some((each) => each.words === limit.words && Math.hypot(each.at[0] - at[0], each.at[1] - at[1]) < 40))
      continue;
    const look = { colour, size: 11 * frame.type, ground: ink("paper") };
    said.push({
      words: limit.words,
      at,
      box: drawBeside(
        context,
        limit.words,
        at,
        beside,
        look,
        said.map((each) => each.box),
      ),
    });
  }
}

/** Words beside a bracket, moved away from it until they cover none of the boxes taken; gives the box they take. */
function drawBeside(context, text, [x, y], [dx, dy, align, base], look, taken) {
  context.save();
  context.font = `${look.size}px ${getComputedStyle(context.canvas).fontFamily}`;
  const wide = context.measureText(text).width + 6;
  context.restore();
  const left = x + dx - (align === "right" ? wide : align === "center" ? wide / 2 : 0);
  const boxAt = (shift) => {
    const top = y + dy + shift - (base === "bottom" ? look.size : base === "middle" ? look.size / 2 : 0);
    return [left, top, left + wide, top + look.size + 2];
  };
  const step = (dy < 0 ? -1 : 1) * (look.size + 3);
  const shifts = [0, 1, 2, 3].map((each) => each * step);
  const shift = shifts.find((each) => taken.every((box) => apart(box, boxAt(each)))) ?? 0;
  words(context, text, x + dx, y + dy + shift, { ...look, align, base });
  return boxAt(shift);
}

const apart = (one, other) => one[2] <= other[0] || other[2] <= one[0] || one[3] <= other[1] || other[3] <= one[1];
