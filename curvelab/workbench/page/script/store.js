// From the desk into the library: one button when nothing is open, signed with a name.

import { post } from "./api.js";
import { el, fill } from "./dom.js";
import { nameField, ownName } from "./person.js";
import { attempt, said } from "./say.js";
import { count } from "./words.js";

export class Store {
  constructor(desk) {
    this.desk = desk;
    this.name = nameField("Stored by");
    this.note = el("input", {
      type: "text",
      maxlength: 400,
      placeholder: "Note (may be left out)",
      "aria-label": "Note",
      autocomplete: "off",
    });
    this.button = el("button", { type: "submit", class: "strong store-button" }, "Store");
    this.why = el("p", { class: "hint" });
    this.stored = el("p", { class: "stored" });
    const form = el(
      "form",
      { class: "store", "aria-label": "Store", onsubmit: (event) => this.#submit(event) },
      this.name.node,
      this.note,
      this.button,
    );
    this.node = el("section", { class: "store-part" }, form, this.why, this.stored);
  }

  update() {
    const { state } = this.desk.draft;
    const ready = state.can_store;
    this.button.setAttribute("aria-disabled", String(!ready));
    const open = state.open?.length ?? 0;
    this.why.textContent = ready
      ? ""
      : open
        ? `Settle or accept ${count(open, "entry", "entries")} first.`
        : state.work.state === "reading"
          ? "The sheet is still being read."
          : "There is nothing to store yet.";
    if (this.storedVersion !== state.version) fill(this.stored);
  }

  async #submit(event) {
    event.preventDefault();
    const { draft } = this.desk;
    const author = ownName(this.name.input.value);
    this.button.disabled = true;
    // What was typed last may still be on its way.
    await draft.settled();
    if (!draft.state.can_store) {
      this.button.disabled = false;
      said(this.why.textContent);
      return void this.desk.openList.step(1);
    }
    const answer = await attempt(() => post(`${draft.path}/store`, { author, note: this.note.value.trim() }));
    this.button.disabled = false;
    if (!answer) return;
    this.storedVersion = draft.state.version;
    const links = answer.devices.map(({ key, revision }) =>
      el("a", { href: `#/device/${encodeURIComponent(`${key}@${revision}`)}` }, `${key}, revision ${revision}`),
    );
    fill(
      this.stored,
      el("span", {}, "Stored as "),
      links.flatMap((link, k) => (k ? [", ", link] : [link])),
    );
    said(`Stored ${count(answer.devices.length, "device")} as draft. A second person reviews and releases.`, {
      label: "Open",
      act: () => links[0].click(),
    });
  }
}
