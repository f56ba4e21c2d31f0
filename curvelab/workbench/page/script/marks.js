// The marks of both axes as small handles on the sheet: dragged, moved by arrow keys, said anew, taken away.

import { button, el, fill } from "./dom.js";
import { byUnit, current } from "./words.js";

const ARROWS = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] };
const REST_MS = 700;

export class Marks {
  /** `pane` gives view, redraw, glass(place) and the draft. */
  constructor(pane) {
    this.pane = pane;
    this.node = el("div", { class: "marks" });
    this.handles = [];
    this.shown = "";
  }

  #wanted() {
    const { state, reading } = this.pane.draft;
    const marks = [];
    for (const axis of ["current", "time", "let_through", "peak"]) {
      const given = state?.data?.axes?.[axis]?.marks ?? [];
      const read = reading?.axes?.[axis];
      const told = !state.read_from_sheet.includes(`axes.${axis}.marks`);
      given.forEach((mark, index) =>
        marks.push({
          axis,
          index,
          told,
          at: mark.at,
          value: mark.value,
          unit: mark.unit ?? state.data.axes[axis].unit ?? read?.unit ?? "",
          direction: read?.direction ?? (axis === "current" ? "x" : "y"),
        }),
      );
    }
    return marks;
  }

  update() {
    const marks = this.#wanted();
    const text = JSON.stringify(marks);
    if (text !== this.shown) {
      this.shown = text;
      this.handles = marks.map((mark) => this.#handle(mark));
      fill(
        this.node,
        this.handles.map((each) => each.node),
      );
    }
    this.place();
  }

  place() {
    const { view } = this.pane;
    for (const { node, mark } of this.handles) {
      const [x, y] = view.toScreen(mark.at);
      const out = x < -20 || y < -20 || x > view.width + 20 || y > view.height + 20;
      node.classList.toggle("away", out);
      node.style.transform = `translate(${x}px, ${y}px)`;
    }
  }

  #handle(mark) {
    const words = written(mark);
    const name = `Mark ${words} on the ${axisName(mark.axis)} axis. Arrow keys move it, Enter says its value, Delete takes it away.`;
    const node = button("", null, {
      class: `mark along-${mark.direction} ${mark.told ? "told" : ""}`,
      "aria-label": name,
      "data-focus": `mark-${mark.axis}-${mark.index}`,
    });
    node.append(el("span", { class: "mark-words", "aria-hidden": "true" }, words));
    const handle = { node, mark: { ...mark, at: [...mark.at] } };
    node.addEventListener("pointerdown", (event) => this.#drag(handle, event));
    node.addEventListener("dblclick", () => this.pane.askMark(handle.mark));
    node.addEventListener("keydown", (event) => this.#key(handle, event));
    node.addEventListener("blur", () => this.pane.glass(null));
    return handle;
  }

  #drag(handle, event) {
    if (event.button !== 0) return;
    event.stopPropagation();
    const { node, mark } = handle;
    const from = [event.clientX, event.clientY];
    const start = [...mark.at];
    let moved = false;
    node.setPointerCapture(event.pointerId);
    const move = (next) => {
      const offset = [next.clientX - from[0], next.clientY - from[1]];
      if (!moved && Math.hypot(...offset) < 3) return;
      moved = true;
      mark.at = start.map((each, i) => each + offset[i] / this.pane.view.scale);
      this.place();
      this.pane.glass(mark.at);
    };
    const end = (last) => {
      node.removeEventListener("pointermove", move);
      this.pane.glass(null);
      if (last.type === "pointerup" && moved) this.#commit(handle);
      else mark.at = start;
      this.place();
    };
    node.addEventListener("pointermove", move);
    node.addEventListener("pointerup", end, { once: true });
    node.addEventListener("pointercancel", end, { once: true });
  }

  #key(handle, event) {
    const { mark } = handle;
    const arrow = ARROWS[event.key];
    if (arrow) {
      const step =
        (event.shiftKey ? 10 : 1) /
        Math.max(1, this.pane.view.scale / this.pane.view.unitPixels) /
        this.pane.view.unitPixels;
      mark.at = mark.at.map((each, i) => each + arrow[i] * step);
      this.place();
      this.pane.glass(mark.at);
      clearTimeout(handle.timer);
      handle.timer = setTimeout(() => this.#commit(handle), REST_MS);
    } else if (event.key === "Enter") this.pane.askMark(mark);
    else if (event.key === "Delete" || event.key === "Backspace")
      this.pane.draft.change({ kind: "remove-mark", axis: mark.axis, index: mark.index });
    else return;
    event.preventDefault();
    event.stopPropagation();
  }

  async #commit(handle) {
    const { axis, index, at } = handle.mark;
    const kept = await this.pane.draft.change({
      kind: "move-mark",
      axis,
      index,
      at: at.map((each) => Number(each.toFixed(2))),
    });
    if (!kept) {
      this.shown = "";
      this.update();
    }
  }
}

export function axisName(axis) {
  return axis.replace("_", "-");
}

function written({ axis, value, unit }) {
  const text = value === null || value === undefined ? "?" : byUnit(value, "ratio", 6);
  if (axis === "current" && unit?.startsWith("x")) return current(value, unit, 6);
  return unit ? `${text}\u00a0${unit}` : text;
}
