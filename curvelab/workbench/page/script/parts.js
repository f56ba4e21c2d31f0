// What the reading is made of: its lines and its axes, each to be chosen and put right in place.

import { button, el, field, fill } from "./dom.js";
import { axisName } from "./marks.js";
import { count, EDGES, ELEMENTS, MEANINGS } from "./words.js";

const AXES = ["current", "time", "let_through", "peak"];
const UNITS = {
  current: ["A", "kA", "mA", "xIn", "xIr", "xIsd", "xIi", "xIg", "xIdn"],
  time: ["s", "ms", "min", "h"],
  let_through: ["A2s", "kA2s"],
  peak: ["A", "kA"],
};

export class Parts {
  constructor(desk) {
    this.desk = desk;
    this.node = el("div", { class: "parts" });
    this.axisOpen = null;
    this.shown = "";
  }

  update() {
    const { draft, chosen } = this.desk;
    const { reading, state } = draft;
    const curves = state.data?.curves ?? [];
    const found = (reading?.curves ?? []).map((curve, index) => [curve.entry ?? index, curve]);
    const told = JSON.stringify([
      state.data?.axes,
      curves,
      state.data?.devices?.map((each) => each.key),
      chosen,
      this.axisOpen,
      state.reading_version,
    ]);
    if (told === this.shown) return;
    this.shown = told;
    const rows = Math.max(curves.length, found.length);
    const lines = Array.from({ length: rows }, (_, index) =>
      this.#line(index, curves[index], found.find(([entry]) => entry === index)?.[1]),
    );
    const axes = AXES.filter((axis) => reading?.axes?.[axis] || state.data?.axes?.[axis]);
    const empty = el(
      "p",
      { class: "hint" },
      state.sheet ? "Click a line on the sheet: it is followed from there." : "This device has no curve.",
    );
    fill(
      this.node,
      el("h2", {}, "Lines"),
      rows ? el("ul", { class: "rows" }, lines) : empty,
      axes.length > 0 && el("h2", {}, "Axes"),
      axes.length > 0 &&
        el(
          "ul",
          { class: "rows" },
          axes.map((axis) => this.#axis(axis)),
        ),
    );
  }

  #line(index, entry, read) {
    const { desk } = this;
    const edge = read?.edge ?? entry?.edge;
    const here = desk.chosen === index;
    const meaning = MEANINGS[read?.meaning ?? entry?.meaning] ?? "meaning not said";
    const element = read?.element ?? entry?.element ?? "whole";
    const keys = this.#keys();
    const of = entry?.device ?? read?.device;
    const go = button("", () => desk.choose(here ? null : index), {
      class: "row-go",
      "aria-pressed": here,
      "data-focus": `line-${index}`,
    });
    go.append(
      el("span", { class: `stroke ${edge ?? "none"}` }),
      el(
        "span",
        {},
        `${EDGES[edge] ?? "Which edge?"}${element === "whole" ? "" : `, ${ELEMENTS[element] ?? element}`}`,
      ),
      el("small", {}, read ? (keys.length > 1 && of ? of : meaning) : "not followed"),
    );
    return el("li", { class: here ? "here" : "" }, go, here && this.#lineForm(index, entry ?? {}, read));
  }

  #keys() {
    return (this.desk.draft.state.data?.devices ?? []).map((device) => device.key);
  }

  #lineForm(index, entry, read) {
    const { draft } = this.desk;
    const set = (fields) => draft.change({ kind: "set-curve", curve: index, fields });
    const pick = (name, words, value) =>
      field(
        name[0].toUpperCase() + name.slice(1),
        el(
          "select",
          { "data-focus": `line-${index}-${name}`, onchange: (event) => set({ [name]: event.target.value || null }) },
          !value && el("option", { value: "" }, "—"),
          Object.entries(words).map(([key, text]) => el("option", { value: key, selected: key === value }, text)),
        ),
      );
    const keys = this.#keys();
    const places = entry.through?.length ?? 0;
    return el(
      "div",
      { class: "row-form" },
      pick("edge", EDGES, entry.edge ?? read?.edge),
      pick("meaning", MEANINGS, entry.meaning ?? read?.meaning),
      pick("element", ELEMENTS, entry.element ?? read?.element ?? "whole"),
      keys.length > 1 &&
        pick("device", Object.fromEntries(keys.map((key) => [key, key])), entry.device ?? read?.device),
      el(
        "p",
        { class: "hint" },
        `${count(places, "place")} said, ${count(entry.avoid?.length ?? 0, "box", "boxes")} left out. Clicks on the sheet now go to this line.`,
      ),
      el(
        "div",
        { class: "row-acts" },
        places > 0 && button("Forget the last place", () => set({ through: entry.through.slice(0, -1) })),
        entry.avoid?.length > 0 && button("Take the last box back", () => set({ avoid: entry.avoid.slice(0, -1) })),
        button("Remove this line", () => this.#remove(index)),
      ),
    );
  }

  async #remove(index) {
    if (await this.desk.draft.change({ kind: "remove-curve", curve: index })) this.desk.choose(null);
  }

  #axis(axis) {
    const { reading, state } = this.desk.draft;
    const read = reading?.axes?.[axis];
    const given = state.data?.axes?.[axis] ?? {};
    const here = this.axisOpen === axis;
    const marks = given.marks?.length ?? 0;
    const unit = read?.unit ?? given.unit ?? "unit not said";
    const go = button("", () => ((this.axisOpen = here ? null : axis), this.update()), {
      class: "row-go",
      "aria-expanded": here,
      "data-focus": `axis-${axis}`,
    });
    const how = marks
      ? `${count(marks, "mark")}${read?.mark_residual_rms ? `, ${read.mark_residual_rms.toFixed(1)} px off` : ""}`
      : read
        ? "read by itself"
        : "not known yet";
    go.append(
      el("span", { class: "axis-name" }, axisName(axis)),
      el("span", {}, `${read?.scale ?? given.scale ?? "log"}, ${unit}`),
      el("small", {}, how),
    );
    return el("li", { class: here ? "here" : "" }, go, here && this.#axisForm(axis, given, read));
  }

  #axisForm(axis, given, read) {
    const set = (fields) => this.desk.draft.change({ kind: "set-axis", axis, fields });
    const option = (value, chosen) => el("option", { value, selected: value === chosen }, value);
    const factor = el("input", {
      type: "text",
      inputmode: "decimal",
      size: 5,
      value: given.factor ?? read?.factor ?? 1,
      "data-focus": `axis-${axis}-factor`,
      onchange: (event) => set({ factor: Number(event.target.value) || event.target.value }),
    });
    return el(
      "div",
      { class: "row-form" },
      field(
        "Unit",
        el(
          "select",
          { "data-focus": `axis-${axis}-unit`, onchange: (event) => set({ unit: event.target.value }) },
          UNITS[axis].map((each) => option(each, given.unit ?? read?.unit)),
        ),
      ),
      field(
        "Scale",
        el(
          "select",
          { "data-focus": `axis-${axis}-scale`, onchange: (event) => set({ scale: event.target.value }) },
          ["log", "linear"].map((each) => option(each, given.scale ?? read?.scale)),
        ),
      ),
      field("Printed times", factor),
      el("p", { class: "hint" }, "Double-click a number beside the axis to say what it is; drag a mark to move it."),
    );
  }
}
