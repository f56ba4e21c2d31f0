// The small field that asks for the value at a place of an axis.

import { button, el, field, fill } from "./dom.js";
import { axisName } from "./marks.js";
import { said } from "./say.js";
import { typedNumber } from "./words.js";

const AXES = ["current", "time", "let_through", "peak"];

export class Saying {
  constructor(pane) {
    this.pane = pane;
    this.node = el("form", {
      class: "saying",
      hidden: true,
      "aria-label": "Say the value of a mark",
      onsubmit: (event) => this.#submit(event),
    });
    this.node.addEventListener("keydown", (event) => {
      if (event.key !== "Escape") return;
      event.stopPropagation();
      this.close(true);
    });
    this.mark = null;
  }

  /** Ask for the value of a mark: { axis, index (null for a new one), at, value }. */
  ask(mark) {
    this.mark = mark;
    const known = this.pane.draft.plane?.quantity;
    const axes = AXES.filter((axis) => axis === "current" || axis === (known ?? "time"));
    this.axis = el(
      "select",
      {},
      axes.map((axis) => el("option", { value: axis, selected: axis === mark.axis }, `${axisName(axis)} axis`)),
    );
    this.axis.disabled = mark.index !== null;
    this.axis.addEventListener("change", () => (this.unit.textContent = this.#unit()));
    this.value = el("input", {
      type: "text",
      inputmode: "decimal",
      autocomplete: "off",
      size: 7,
      value: mark.value ?? "",
    });
    this.unit = el("span", { class: "unit" }, this.#unit());
    fill(
      this.node,
      field("On the", this.axis),
      field("it is", this.value),
      this.unit,
      el("button", { type: "submit", class: "strong" }, "Say so"),
      mark.index !== null && button("Take away", () => this.#takeAway(), { class: "plain" }),
    );
    this.node.hidden = false;
    this.place();
    this.value.focus();
    this.value.select();
  }

  #unit() {
    const axis = this.axis.value;
    return this.pane.draft.state.data?.axes?.[axis]?.unit ?? this.pane.draft.reading?.axes?.[axis]?.unit ?? "";
  }

  place() {
    if (this.node.hidden) return;
    const [x, y] = this.pane.view.toScreen(this.mark.at);
    const box = this.node.getBoundingClientRect();
    const left = Math.max(8, Math.min(this.pane.view.width - box.width - 8, x - box.width / 2));
    const top = y + 18 + box.height > this.pane.view.height ? y - 18 - box.height : y + 18;
    this.node.style.transform = `translate(${left}px, ${Math.max(8, top)}px)`;
  }

  close(back = false) {
    if (this.node.hidden) return;
    this.node.hidden = true;
    if (back) this.pane.canvasNode.focus({ preventScroll: true });
  }

  async #submit(event) {
    event.preventDefault();
    const value = typedNumber(this.value.value);
    if (value === null) return said("That is no number. Write it as on the axis, for example 1000 or 0.01.");
    const { index, at } = this.mark;
    const axis = this.axis.value;
    const change = index === null ? { kind: "mark", axis, at, value } : { kind: "move-mark", axis, index, at, value };
    if (await this.pane.draft.change(change)) this.close(true);
    return undefined;
  }

  async #takeAway() {
    const { axis, index } = this.mark;
    if (await this.pane.draft.change({ kind: "remove-mark", axis, index })) this.close(true);
  }
}
