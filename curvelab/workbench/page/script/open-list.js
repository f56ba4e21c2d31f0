// What still stands between this sheet and the library, most harmful first: a sentence, its place, and what settles it.

import { part, query } from "./api.js";
import { button, el, fill } from "./dom.js";
import { nameField, ownName } from "./person.js";
import { said } from "./say.js";
import { count, plain, typedNumber } from "./words.js";

const CUT = { radius: 30, zoom: 2.6 };

export class OpenList {
  constructor(desk) {
    this.desk = desk;
    this.node = el("section", { class: "open-list", "aria-label": "Still open" });
    this.at = null;
    this.asking = null;
    this.shown = "";
  }

  get entries() {
    return this.desk.draft.state?.open ?? [];
  }

  update() {
    const { state } = this.desk.draft;
    if (this.at && !this.entries.some((entry) => entry.id === this.at)) this.#moveOn();
    const text = JSON.stringify([this.entries, this.at, this.asking, state.work.state, state.can_store]);
    if (text === this.shown) return;
    this.shown = text;
    fill(
      this.node,
      this.#head(),
      el(
        "ol",
        {},
        this.entries.map((entry) => this.#entry(entry)),
      ),
    );
  }

  #head() {
    const { work } = this.desk.draft.state;
    const many = this.entries.length;
    const words = many
      ? count(many, "thing still open", "things still open")
      : work.state === "ready"
        ? "Nothing is open"
        : "Reading";
    const hint = many
      ? "Each is settled by one or two answers, or accepted with a reason."
      : work.state === "ready"
        ? "Look it over once more, then store."
        : "What is open appears here.";
    return [
      el("div", { role: "status" }, el("h2", { class: many ? "warm" : "" }, words)),
      el("p", { class: "hint" }, hint),
    ];
  }

  #entry(entry) {
    const here = entry.id === this.at;
    const go = button("", () => this.goTo(entry), {
      class: "entry-go",
      "data-focus": `open-${entry.id}`,
      "aria-expanded": here,
    });
    const cut = this.#cut(entry);
    if (cut) go.append(cut);
    go.append(el("span", { class: "entry-text" }, plain(entry.text)));
    const own = entry.answers.map((answer, index) => this.#answer(entry, answer, index));
    const strip =
      entry.kind === "device" &&
      !own.length &&
      button("Fill in what is marked above", () => this.desk.strip.begin(), {
        class: "strong",
        "data-focus": `answer-${entry.id}-0`,
      });
    const answers = here && el("div", { class: "answers" }, own, strip);
    return el("li", { class: here ? "entry here" : "entry" }, go, answers);
  }

  #cut(entry) {
    if (!entry.at) return null;
    const { draft } = this.desk;
    const perUnit = draft.state.sheet?.pixels?.per_unit ?? 1;
    const [x, y] = entry.at;
    const path = query(`/api/drafts/${part(draft.id)}/cut.png`, {
      x,
      y,
      radius: (CUT.radius / perUnit).toFixed(1),
      zoom: CUT.zoom,
      page: draft.state.sheet?.page,
    });
    return el("img", { src: path, alt: "", class: "cut", width: 64, height: 64, loading: "lazy" });
  }

  #answer(entry, answer, index) {
    const name = `answer-${entry.id}-${index}`;
    if (this.asking === name) return this.#asked(entry, answer);
    const look = index ? "" : "strong";
    return button(answer.text, () => this.#take(entry, answer, name), { class: look, "data-focus": name });
  }

  #take(entry, answer, name) {
    if (answer.asks === "place") return this.#byPlace(answer, entry);
    if (answer.asks) {
      this.asking = name;
      this.update();
      return this.node.querySelector(".asked input")?.focus();
    }
    if (answer.change) return this.desk.draft.change(answer.change);
    return this.goTo(entry);
  }

  async #byPlace(answer, entry) {
    if (entry.curve !== null && entry.curve !== undefined) this.desk.choose(entry.curve);
    const at = await this.desk.sheet.acts.nextPlace();
    if (at) await this.desk.draft.change({ ...answer.change, at });
  }

  #asked(entry, answer) {
    const value = answer.asks === "value";
    const input = el("input", {
      type: "text",
      autocomplete: "off",
      required: true,
      "aria-label": value ? "Value" : "Reason",
      placeholder: value ? "Value" : "Reason",
      "data-focus": `asked-${entry.id}`,
    });
    const name = value ? null : nameField();
    const alike = value ? 0 : this.entries.filter((each) => each.code === entry.code && each.at).length - 1;
    const all = alike > 0 && el("input", { type: "checkbox" });
    const submit = async (event) => {
      event.preventDefault();
      const text = input.value.trim();
      const given = value
        ? valueInto(answer.change, typedNumber(text) ?? text)
        : { reason: text, name: ownName(name.input.value) };
      if (!text || (name && !given.name)) return said(value ? "Say a value." : "Say a reason and your name.");
      const { at, ...everywhere } = answer.change;
      const change = all?.checked ? everywhere : answer.change;
      if (await this.desk.draft.change({ ...change, ...given })) this.asking = null;
      return this.update();
    };
    const cancel = (event) => {
      if (event.key !== "Escape") return;
      event.stopPropagation();
      this.asking = null;
      this.update();
    };
    return el(
      "form",
      { class: "asked", onsubmit: submit, onkeydown: cancel },
      input,
      name?.node,
      all && el("label", { class: "check" }, all, `and ${count(alike, "other", "others")} like it`),
      el("button", { type: "submit", class: "strong" }, value ? "Say so" : "Accept"),
    );
  }

  goTo(entry) {
    this.at = entry.id;
    this.asking = null;
    this.desk.opened = entry;
    if (entry.curve !== null && entry.curve !== undefined) this.desk.choose(entry.curve);
    const device = entry.answers.map((answer) => answer.change?.device).find(Number.isInteger);
    if (device !== undefined) this.desk.strip.turnTo(device);
    const place = entry.at ?? (entry.box && [(entry.box[0] + entry.box[2]) / 2, (entry.box[1] + entry.box[3]) / 2]);
    if (place) this.desk.sheet.goTo(place);
    this.update();
    this.node.querySelector(".entry.here")?.scrollIntoView({ block: "nearest" });
  }

  /** The next (step 1) or the one before (step -1); focus goes along. */
  step(step) {
    if (!this.entries.length) return said("Nothing is open.");
    const index = this.entries.findIndex((entry) => entry.id === this.at);
    const next = this.entries[(index + step + this.entries.length) % this.entries.length] ?? this.entries[0];
    this.goTo(next);
    return this.node.querySelector(`[data-focus="open-${CSS.escape(next.id)}"]`)?.focus();
  }

  answer(number) {
    const entry = this.entries.find((each) => each.id === this.at);
    const answer = entry?.answers[number - 1];
    if (entry && !entry.answers.length) this.desk.strip.begin();
    else if (answer) this.#take(entry, answer, `answer-${entry.id}-${number - 1}`);
  }

  #moveOn() {
    this.at = null;
    this.asking = null;
    this.desk.opened = null;
  }
}

/** Where the value goes: into the field that is left blank, or the change itself. */
function valueInto(change, value) {
  if (!change.fields) return { value };
  return { fields: Object.fromEntries(Object.entries(change.fields).map(([key, given]) => [key, given ?? value])) };
}
