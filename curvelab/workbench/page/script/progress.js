// How far the reading is, with a way to stop it and to go on.

import { post } from "./api.js";
import { button, el, fill } from "./dom.js";
import { attempt } from "./say.js";

const QUIET_MS = 350;

export class Progress {
  constructor(draft) {
    this.draft = draft;
    this.node = el("div", { class: "progress", hidden: true });
    this.bar = el("progress", { max: 1, "aria-label": "Reading the sheet" });
    this.stage = el("span", { role: "status" });
    this.since = null;
  }

  update() {
    const { work } = this.draft.state;
    if (work.state === "reading") return this.#reading(work);
    clearTimeout(this.timer);
    this.since = null;
    this.node.hidden = work.state !== "cancelled";
    if (!this.node.hidden)
      fill(
        this.node,
        el("span", {}, "Reading was stopped."),
        button("Read on", () => attempt(() => post(`${this.draft.path}/read`)), { class: "plain" }),
      );
    return undefined;
  }

  /** A short reading shows nothing; a long one shows how far it is. */
  #reading({ stage, fraction }) {
    this.stage.textContent = stage || "Reading";
    if (fraction > 0) this.bar.value = fraction;
    else this.bar.removeAttribute("value");
    if (this.since) return;
    this.since = Date.now();
    this.timer = setTimeout(() => {
      fill(
        this.node,
        this.stage,
        this.bar,
        button("Stop", () => attempt(() => post(`${this.draft.path}/cancel`)), { class: "plain" }),
      );
      this.node.hidden = false;
    }, QUIET_MS);
  }
}
