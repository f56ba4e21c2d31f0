// Single keys, for those who want them: they can be turned off, and never act while something is being typed.

import { button, el } from "./dom.js";
import { toggleDrawer } from "./drawer.js";

const OFF = "curvelab-keys-off";

const KEYS = [
  ["n, p", "next and previous open entry"],
  ["1, 2, 3", "first, second, third answer of the open entry"],
  ["f (hold)", "the bare paper in both views"],
  ["l", "choose the next line; clicks then go to it"],
  ["w", "the worksheet as text"],
  ["h", "what was done"],
  ["Ctrl Z, Ctrl Shift Z", "undo, redo"],
  ["s", "go to Store"],
  ["/", "search the library"],
  ["Esc", "close, let go"],
  ["On a view: arrows", "move the cross (Shift: faster)"],
  ["+, −, 0", "nearer, farther, whole sheet"],
  ["Enter, Shift Enter", "the line passes here, not here"],
  ["b, b", "two corners of a box to leave out"],
  ["v", "say the value at the cross"],
];

const keysOn = () => localStorage.getItem(OFF) === null;

function showKeys() {
  toggleDrawer("keys", "Keys", () => {
    const toggle = el("input", {
      type: "checkbox",
      checked: keysOn(),
      onchange: (event) => (event.target.checked ? localStorage.removeItem(OFF) : localStorage.setItem(OFF, "1")),
    });
    return [
      el("label", { class: "check" }, toggle, el("span", {}, "Single keys act")),
      el(
        "dl",
        { class: "keys" },
        KEYS.map(([key, does]) => [el("dt", {}, key), el("dd", {}, does)]),
      ),
      el("h3", {}, "By hand"),
      el(
        "p",
        {},
        "Click on a line: it passes here. Hold Shift and click: not here. Hold Shift and drag: leave this box out. Drag a mark: it moves. Double-click a number beside an axis: say what it is. Drag the paper, turn the wheel: look around.",
      ),
    ];
  });
}

const typing = (target) => target.closest("input:not([type=checkbox]), textarea, select, [contenteditable]");

/** Keys of the whole page; `desk()` gives the desk or null. */
export function watchKeys(desk) {
  document.addEventListener("keydown", (event) => {
    const now = desk();
    if (event.key === "Escape") return now?.giveUp();
    if (typing(event.target)) return undefined;
    if ((event.ctrlKey || event.metaKey) && now && "zy".includes(event.key.toLowerCase())) {
      event.preventDefault();
      return event.key.toLowerCase() === "y" || event.shiftKey ? now.redo() : now.undo();
    }
    if (event.ctrlKey || event.metaKey || event.altKey || !keysOn()) return undefined;
    const act = event.key === "?" ? showKeys : event.key === "/" ? searchLibrary : now && deskKeys(now, event);
    if (!act) return undefined;
    event.preventDefault();
    return act();
  });
  document.addEventListener("keyup", (event) => event.key === "f" && desk()?.lay(false));
  window.addEventListener("blur", () => desk()?.lay(false));
}

function deskKeys(desk, { key }) {
  if (/^[1-9]$/.test(key)) return () => desk.openList.answer(Number(key));
  return {
    f: () => desk.lay(true),
    n: () => desk.openList.step(1),
    p: () => desk.openList.step(-1),
    w: () => desk.showWorksheet(),
    h: () => desk.showHistory(),
    l: () => desk.chooseNext(),
    s: () => desk.store.button.focus(),
  }[key];
}

function searchLibrary() {
  if (!location.hash.startsWith("#/library")) location.hash = "#/library";
  requestAnimationFrame(() => document.querySelector("#search")?.focus());
}

export const keysButton = () => button("Keys", showKeys, { class: "plain", "aria-keyshortcuts": "?" });
