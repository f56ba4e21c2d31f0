// Where one comes in: what to do with a sheet, what is on the desk, and the demo sheets.

import { get, part, post, remove } from "./api.js";
import { button, el, fill } from "./dom.js";
import { attempt, said } from "./say.js";
import { takeDemo, takeFiles } from "./take-in.js";
import { moment } from "./words.js";

const KINDS = ".png,.jpg,.jpeg,.tif,.tiff,.bmp,.webp,.pdf,.svg,.toml";
const STATES = {
  reading: "being read",
  ready: "read",
  failed: "needs help",
  cancelled: "stopped",
  closed: "as you left it",
};

export class Start {
  constructor() {
    this.file = el("input", {
      type: "file",
      accept: KINDS,
      class: "unseen",
      id: "file",
      multiple: true,
      onchange: () => takeFiles([...this.file.files]),
    });
    this.drafts = el("section", { class: "start-part", "aria-labelledby": "on-desk" });
    this.demos = el("section", { class: "start-part", "aria-labelledby": "demo-sheets" });
    const welcome = el(
      "section",
      { class: "welcome" },
      el("h1", {}, "Drop a sheet here"),
      el(
        "p",
        {},
        "A scan, photo, PDF or SVG with a time-current curve. Or paste a picture, or ",
        el("label", { for: "file", class: "link" }, "choose a file", this.file),
        ".",
      ),
    );
    this.node = el("div", { class: "start" }, welcome, this.drafts, this.demos);
  }

  async open() {
    document.title = "curvelab";
    await Promise.all([this.#drafts(), this.#demos()]);
  }

  /** The address changed, and this view stays: something was put on the desk. */
  turned() {
    return this.#drafts();
  }

  async #drafts() {
    const drafts = await attempt(() => get("/drafts"));
    if (!drafts) return;
    const rows = drafts.map((draft) =>
      el(
        "li",
        {},
        el("a", { href: `#/sheet/${part(draft.id)}` }, draft.name),
        el("small", {}, `${STATES[draft.state] ?? draft.state}, ${moment(draft.changed)}`),
        button("Put away", () => this.#putAway(draft), { class: "plain", "aria-label": `Put away ${draft.name}` }),
      ),
    );
    fill(
      this.drafts,
      el("h2", { id: "on-desk" }, "On the desk"),
      rows.length ? el("ul", { class: "desk-list" }, rows) : el("p", { class: "hint" }, "No sheet is being worked on."),
    );
  }

  async #putAway(draft) {
    if ((await attempt(async () => (await remove(`/drafts/${part(draft.id)}`), true))) === null) return;
    said(`${draft.name} is put away.`, {
      label: "Undo",
      act: () => attempt(() => post(`/drafts/${part(draft.id)}/restore`)).then(() => this.#drafts()),
    });
    this.#drafts();
  }

  async #demos() {
    const demos = await attempt(() => get("/demo-sheets"));
    if (!demos) return;
    const rows = demos.map(({ name }) =>
      el(
        "li",
        {},
        button("", () => takeDemo(name), { class: "demo" }),
      ),
    );
    rows.forEach((row, k) =>
      row.firstChild.append(el("span", {}, demos[k].title || demos[k].name), el("small", {}, demos[k].name)),
    );
    fill(this.demos, el("h2", { id: "demo-sheets" }, "Or begin with a demo sheet"), el("ul", { class: "demos" }, rows));
  }
}
