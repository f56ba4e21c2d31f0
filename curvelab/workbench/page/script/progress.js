// How far the reading is, with a way to stop it; what went wrong stays until it is put right.

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
    const failed = work.state === "failed" && work.error;
    this.node.hidden = !(failed || work.state === "cancelled");
    this.node.classList.toggle("failed", Boolean(failed));
    if (failed) {
      const { problem, expected, fix } = work.error;
      fill(this.node, el("div", { role: "alert" }, el("strong", {}, `${problem}.`), expected && el("span", {}, ` Expected: ${expected}.`), fix && el("span", {}, ` ${fix}.`)));
    } else if (work.state === "cancelled") {
      fill(this.node, el("span", {}, "Reading was stopped. The next step you take starts it again."));
    }
    return undefined;
  }

  /** A short reading shows nothing; a long one shows how far it is. */
  #reading({ stage, fraction }) {
    this.stage.textContent = stage || "Reading";
    if (fraction > 0) this.bar.value = fraction;
    else this.bar.removeAttribute("value");
    if (this.since) return;
    this.since = Date.now();
    this.node.classList.remove("failed");
    this.timer = setTimeout(() => {
      fill(this.node, this.stage, this.bar, button("Stop", () => attempt(() => post(`${this.draft.path}/cancel`)), { class: "plain" }));
      this.node.hidden = false;
    }, QUIET_MS);
  }
}
