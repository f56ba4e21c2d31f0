// A second person decides about a revision: checked, released or withdrawn, signed with a name.

import { part, post } from "./api.js";
import { button, el, fill } from "./dom.js";
import { nameField, ownName } from "./person.js";
import { attempt, said } from "./say.js";
import { moment } from "./words.js";

const STEPS = {
  draft: [
    ["checked", "Mark as checked"],
    ["withdrawn", "Withdraw"],
  ],
  checked: [
    ["released", "Release"],
    ["draft", "Back to draft"],
    ["withdrawn", "Withdraw"],
  ],
  released: [["withdrawn", "Withdraw"]],
  withdrawn: [],
};
const NEXT = {
  draft: "It is checked first, then a second person releases it.",
  checked: "Checked; it may be released.",
  released: "Released: calculators use this revision.",
  withdrawn: "Withdrawn: no calculator uses this revision.",
};

export class Review {
  constructor(done) {
    this.done = done;
    this.node = el("section", { class: "review", "aria-label": "Review" });
    this.name = nameField("Reviewed by");
    this.reason = el("input", {
      type: "text",
      maxlength: 400,
      placeholder: "Reason or note",
      "aria-label": "Reason or note",
      autocomplete: "off",
    });
  }

  update(device) {
    this.device = device;
    const steps = STEPS[device.state] ?? [];
    fill(
      this.node,
      el("h2", {}, "Review"),
      el(
        "p",
        { class: "hint" },
        `${NEXT[device.state] ?? ""} Stored ${device.author ? `by ${device.author} ` : ""}${moment(device.stored_at)}.`,
      ),
      this.name.node,
      this.reason,
      el(
        "div",
        { class: "row-acts" },
        steps.map(([to, words], index) =>
          button(words, () => this.#decide(to), {
            class: index || to === "withdrawn" ? "" : "strong",
            "data-focus": `review-${to}`,
          }),
        ),
        button("Note only", () => this.#decide(null), { class: "plain", "data-focus": "review-note" }),
      ),
    );
  }

  async #decide(to) {
    const { key, revision } = this.device;
    const name = ownName(this.name.input.value);
    if (!name) {
      this.name.input.focus();
      return said("Say who reviews.");
    }
    const answer = await attempt(() =>
      post(`/devices/${part(key)}/review`, { revision, to, name, reason: this.reason.value.trim() }),
    );
    if (!answer) return undefined;
    this.reason.value = "";
    said(to ? `${key}, revision ${revision} is ${to}.` : "Noted.");
    return this.done();
  }
}
