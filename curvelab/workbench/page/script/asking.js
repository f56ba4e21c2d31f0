// Asking a stored device: its times at a current, its currents for a time, at its settings. Room for more questions.

import { get, part, query } from "./api.js";
import { button, el, field, fill } from "./dom.js";
import { questionsOf } from "./questions.js";
import { attempt } from "./say.js";
import { current, EDGES, time, withInterval } from "./words.js";

const SIGNS = { at_least: "≥\u00a0", at_most: "≤\u00a0" };

export class Asking {
  /** `settled(settings)` is called when settings were given. */
  constructor(key, settled) {
    Object.assign(this, { key, settled });
    this.node = el("section", { class: "asking", "aria-label": "Ask" });
    this.answer = el("div", { class: "answer", role: "status" });
  }

  update(device) {
    const number = (label, name) =>
      field(label, el("input", { type: "text", inputmode: "decimal", size: 7, name, autocomplete: "off" }));
    this.settings = (device.settings ?? []).map((setting) => ({
      name: setting.name,
      input: el("input", { type: "text", size: 5, placeholder: rangeOf(setting), autocomplete: "off" }),
    }));
    const curves = device.curves.some((curve) => curve.quantity === "time");
    if (!curves) return fill(this.node);
    return fill(
      this.node,
      el("h2", {}, "Ask"),
      this.settings.length > 0 &&
        el(
          "form",
          { class: "row-form", onsubmit: (event) => this.#set(event) },
          this.settings.map(({ name, input }) => field(name, input)),
          el("div", { class: "row-acts" }, button("Set", null, { type: "submit" })),
        ),
      el(
        "form",
        { class: "ask", onsubmit: (event) => this.#ask(event, "trip-time", "current", "time") },
        number("Time at, A", "current"),
        el("button", { type: "submit" }, "Ask"),
      ),
      el(
        "form",
        { class: "ask", onsubmit: (event) => this.#ask(event, "trip-current", "time", "current") },
        number("Current for, s", "time"),
        el("button", { type: "submit" }, "Ask"),
      ),
      this.answer,
      questionsOf(this.key, () => this.#given()),
    );
  }

  #given() {
    return this.settings
      .filter(({ input }) => input.value.trim())
      .map(({ name, input }) => `${name}=${input.value.trim()}`);
  }

  #set(event) {
    event.preventDefault();
    return attempt(() => this.settled(this.#given()));
  }

  async #ask(event, path, name, of) {
    event.preventDefault();
    const value = new FormData(event.target).get(name).trim().replace(",", ".");
    if (!value) return;
    const answer = await attempt(() =>
      get(query(`/devices/${part(this.key)}/${path}`, { [name]: value, set: this.#given() })),
    );
    if (answer) fill(this.answer, lines(answer, of));
  }
}

const TOLD = {
  fast: EDGES.fast,
  slow: EDGES.slow,
  mean: EDGES.mean,
  trips: "Surely trips from",
  holds: "Surely holds up to",
};

function lines(answer, of) {
  const write = of === "time" ? time : (value, figures) => current(value, "A", figures);
  const [told] = answer.answers;
  const rows = Object.entries(TOLD)
    .filter(([name]) => told[name])
    .map(([name, words]) => {
      const { status, value, interval: ends } = told[name];
      if (value === null) return el("div", {}, el("dt", {}, words), el("dd", {}, status.replaceAll("_", " ")));
      const [shown, interval] = withInterval(value, ends, write);
      return el(
        "div",
        {},
        el("dt", {}, words),
        el("dd", {}, el("b", {}, `${SIGNS[status] ?? ""}${shown}`), interval && el("small", {}, ` ${interval}`)),
      );
    });
  return el("dl", { class: "answers-told" }, rows);
}

function rangeOf(setting) {
  const { from_value: from, to_value: to, steps } = setting;
  if (steps?.length) return steps.join(", ");
  return from === null ? "" : `${from} to ${to}`;
}
