// The library: a table one can read at arm's length. Typing filters it, ticking two to eight puts them side by side.

import { get, part, query } from "./api.js";
import { Comparison } from "./comparison.js";
import { button, el, field, fill, settled } from "./dom.js";
import { keepPlace } from "./route.js";
import { attempt, said } from "./say.js";
import { count, current, KINDS, moment } from "./words.js";

const PAGE = 100;
const MOST = 8;
const STATES = ["draft", "checked", "released", "withdrawn"];
const COLUMNS = [
  ["key", "Key"],
  ["kind", "Kind"],
  ["characteristic", "Type"],
  ["rated_current", "Rated"],
  ["standard", "Standard"],
  ["state", "State"],
  ["revision", "Revision"],
  [null, "Stored by"],
  [null, "When"],
];

export class Library {
  constructor(values) {
    this.wanted = { text: "", kind: "", state: "", sort: "key", page: "1", ...values };
    this.chosen = (values.with ?? "").split(",").filter(Boolean).slice(0, MOST);
    this.search = el("input", {
      type: "search",
      id: "search",
      placeholder: "Key, maker, series, standard",
      autocomplete: "off",
      value: this.wanted.text,
      oninput: settled(() => this.#filter({ text: this.search.value }), 180),
    });
    const pick = (name, words) =>
      el(
        "select",
        { onchange: (event) => this.#filter({ [name]: event.target.value }) },
        el("option", { value: "" }, "any"),
        words.map((word) => el("option", { value: word, selected: word === this.wanted[name] }, word)),
      );
    this.sum = el("p", { class: "hint", role: "status" });
    this.table = el("div", { class: "table-part", tabindex: 0, role: "region", "aria-label": "Devices" });
    this.comparison = new Comparison();
    const filters = el(
      "form",
      { class: "filters", role: "search", onsubmit: (event) => event.preventDefault() },
      field("Find", this.search),
      field("Kind", pick("kind", Object.keys(KINDS))),
      field("State", pick("state", STATES)),
      this.sum,
    );
    this.node = el(
      "div",
      { class: "library" },
      el("h1", { class: "unseen" }, "Library"),
      el("div", { class: "library-left" }, filters, this.table),
      this.comparison.node,
    );
  }

  async open() {
    document.title = "Library – curvelab";
    await Promise.all([this.#load(), this.#compare()]);
  }

  /** The address changed, and this view stays. */
  turned(values) {
    const chosen = (values.with ?? "").split(",").filter(Boolean);
    if (String(chosen) === String(this.chosen)) return;
    this.chosen = chosen.slice(0, MOST);
    this.#draw();
    this.#compare();
  }

  #filter(change) {
    Object.assign(this.wanted, { page: "1" }, change);
    const { text, kind, state, sort, page } = this.wanted;
    keepPlace({ text, kind, state, sort: sort === "key" ? null : sort, page: page === "1" ? null : page });
    return this.#load();
  }

  async #load() {
    const { text, kind, state, sort, page } = this.wanted;
    const asked = (this.asked = query("/devices", { text, kind, state, sort, page, count: PAGE }));
    const found = await attempt(() => get(asked));
    if (!found || asked !== this.asked) return;
    this.found = found;
    this.#draw();
  }

  #draw() {
    if (!this.found) return;
    const { total, devices, more } = this.found;
    const filtered = this.wanted.text || this.wanted.kind || this.wanted.state;
    this.sum.textContent = total ? count(more ? `more than ${total}` : total, "device") : "";
    if (!total) return void fill(this.table, this.#empty(filtered));
    fill(
      this.table,
      el(
        "table",
        {},
        el(
          "thead",
          {},
          el(
            "tr",
            {},
            el("th", { scope: "col" }, el("span", { class: "unseen" }, "Side by side")),
            COLUMNS.map((column) => this.#head(column)),
          ),
        ),
        el(
          "tbody",
          {},
          devices.map((device) => this.#row(device)),
        ),
      ),
      total > PAGE && this.#pages(total),
    );
  }

  #empty(filtered) {
    if (filtered)
      return el(
        "div",
        { class: "empty" },
        el("p", {}, "No device is like that."),
        button("Show all", () => ((location.hash = "#/library"), location.reload())),
      );
    return el(
      "div",
      { class: "empty" },
      el("p", {}, "The library is empty. Read a sheet and store it; a demo sheet will do."),
      el("a", { href: "#/" }, "Open a sheet"),
    );
  }

  #head([column, words]) {
    if (!column) return el("th", { scope: "col" }, words);
    const falling = this.wanted.sort === `-${column}`;
    const here = falling || this.wanted.sort === column;
    const turn = () => this.#filter({ sort: here && !falling ? `-${column}` : column });
    return el(
      "th",
      { scope: "col", "aria-sort": here ? (falling ? "descending" : "ascending") : null },
      button(words, turn, { class: "plain sort", "data-focus": `sort-${column}` }),
      here && el("span", { "aria-hidden": "true" }, falling ? " ↓" : " ↑"),
    );
  }

  #row(device) {
    const { key } = device;
    const place = this.chosen.findIndex((each) => each.split("@")[0] === key);
    const tick = el("input", {
      type: "checkbox",
      checked: place >= 0,
      "aria-label": `Side by side: ${key}`,
      "data-focus": `tick-${key}`,
      onchange: (event) => this.#tick(key, event.target.checked),
    });
    const rated = device.rated_current_a !== null ? current(device.rated_current_a) : "";
    const residual =
      device.rated_residual_current_a !== null && device.rated_residual_current_a !== undefined
        ? current(device.rated_residual_current_a)
        : "";
    const letter =
      place >= 0 && this.chosen.length > 1
        ? el("span", { class: `letter d${place + 1}`, "aria-hidden": "true" }, "ABCDEFGH"[place])
        : null;
    return el(
      "tr",
      { class: place >= 0 ? "here" : "" },
      el("td", { class: "tick" }, tick, letter),
      el("th", { scope: "row" }, el("a", { href: `#/device/${part(key)}` }, key)),
      el("td", { title: KINDS[device.kind] ?? null }, device.kind),
      el("td", {}, device.characteristic ?? ""),
      el("td", { class: "number" }, [rated, residual].filter(Boolean).join(" / ")),
      el("td", { class: "wide" }, device.standard ?? ""),
      el("td", {}, el("span", { class: `state ${device.state}` }, device.state)),
      el("td", { class: "number" }, String(device.revision)),
      el("td", { class: "wide" }, device.author || "–"),
      el("td", { class: "wide" }, moment(device.stored_at)),
    );
  }

  #pages(total) {
    const page = Number(this.wanted.page);
    const last = Math.ceil(total / PAGE);
    const to = (number) => () => this.#filter({ page: String(number) });
    return el(
      "nav",
      { class: "table-pages", "aria-label": "Pages of the table" },
      button("Before", to(page - 1), { disabled: page <= 1, "data-focus": "table-before" }),
      el("span", {}, `${page} of ${last}`),
      button("Next", to(page + 1), { disabled: page >= last, "data-focus": "table-next" }),
    );
  }

  #tick(key, on) {
    if (on && this.chosen.length >= MOST) {
      this.#draw();
      return said(`At most ${MOST} devices go side by side.`);
    }
    this.chosen = on ? [...this.chosen, key] : this.chosen.filter((each) => each.split("@")[0] !== key);
    keepPlace({ with: this.chosen.join(",") });
    this.#draw();
    return this.#compare();
  }

  #compare() {
    this.node.classList.toggle("comparing", this.chosen.length > 1);
    return this.comparison.show(this.chosen, (keys) => {
      this.chosen = keys;
      keepPlace({ with: keys.join(",") });
      this.#draw();
      this.#compare();
    });
  }
}
