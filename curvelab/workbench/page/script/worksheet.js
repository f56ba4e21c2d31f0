// The worksheet as text: the document itself, to be read, copied and edited. The views follow it.

import { button, el, settled } from "./dom.js";
import { said } from "./say.js";

const REST_MS = 900;

export class WorksheetText {
  constructor(draft) {
    this.draft = draft;
    this.area = null;
    this.send = settled(() => this.#send(), REST_MS);
  }

  build() {
    this.sent = this.draft.state.worksheet;
    this.area = el("textarea", {
      class: "worksheet-text",
      spellcheck: "false",
      wrap: "off",
      "aria-label": "Worksheet",
      oninput: () => this.send(),
      onkeydown: (event) => event.key !== "Escape" && event.stopPropagation(),
    });
    this.area.value = this.sent;
    this.note = el(
      "p",
      { class: "hint", role: "status" },
      "This text is the whole reading: the same text gives the same numbers on the command line.",
    );
    return [
      this.note,
      this.area,
      el(
        "div",
        { class: "row-acts" },
        button("Copy all", () => this.#copy()),
      ),
    ];
  }

  /** Text that came from elsewhere, unless a person is in the middle of typing. */
  update() {
    const { worksheet } = this.draft.state;
    if (!this.area?.isConnected || worksheet === this.sent) return;
    const typing = this.area.value !== this.sent;
    this.sent = worksheet;
    if (typing) return;
    const { selectionStart, selectionEnd, scrollTop } = this.area;
    this.area.value = worksheet;
    this.area.setSelectionRange(selectionStart, selectionEnd);
    this.area.scrollTop = scrollTop;
  }

  async #send() {
    const text = this.area.value;
    if (text === this.draft.state.worksheet) return;
    const taken = await this.draft.change({ kind: "worksheet", text });
    if (taken) this.sent = this.draft.state.worksheet;
    if (taken && this.area.value === text) this.area.value = this.sent;
    this.note.textContent = taken ? "Taken over." : "Not taken over yet: see the line above.";
  }

  async #copy() {
    await navigator.clipboard.writeText(this.area.value).catch(() => this.area.select());
    said("The worksheet is on the clipboard.");
  }
}
