// Two to eight devices side by side: their bands on one pair of axes, and under it what differs.

import { get, query } from "./api.js";
import { BandPane } from "./band-pane.js";
import { bandsOf, togetherOf } from "./bands-of.js";
import { button, el, fill } from "./dom.js";
import { attempt } from "./say.js";
import { current, plain, time, withInterval } from "./words.js";

const ROWS = 12;
const amperes = (value, figures) => current(value, "A", figures);

export class Comparison {
  constructor() {
    this.pane = new BandPane("Bands side by side.");
    this.head = el("header", { class: "comparison-head" });
    this.words = el("div", { class: "comparison-words", tabindex: 0, role: "region", "aria-label": "Differences" });
    this.hint = el("p", { class: "comparison-hint hint" });
    this.node = el(
      "section",
      { class: "comparison", "aria-label": "Side by side" },
      this.head,
      this.pane.node,
      this.words,
      this.hint,
    );
  }

  /** Show devices in their order; `order` is called with another one, empty for none. */
  async show(keys, order) {
    this.node.hidden = !keys.length;
    const enough = keys.length > 1;
    this.node.classList.toggle("waiting-for-more", !enough);
    this.hint.textContent = enough ? "" : "Tick one more device to see both side by side.";
    if (!enough) return;
    const asked = (this.asked = String(keys));
    fill(
      this.head,
      el("h2", {}, "Side by side"),
      keys.map((key, index) =>
        el("span", { class: "subject" }, el("span", { class: `letter d${index + 1}` }, "ABCDEFGH"[index]), key),
      ),
      el(
        "span",
        { class: "acts" },
        keys.length === 2 && button("Swap", () => order([...keys].reverse()), { class: "plain" }),
        button("Clear", () => order([]), { class: "plain" }),
      ),
    );
    const answers = await attempt(() => Promise.all(keys.map((key) => bandsOf(key))));
    if (!answers || asked !== this.asked) return;
    this.pane.show(togetherOf(answers, keys));
    const compared = await attempt(() => get(query("/compare", { key: keys })));
    const series =
      compared &&
      keys.length === 2 &&
      (await get(query("/discrimination", { upstream: keys[0], downstream: keys[1] })).catch(() => null));
    if (asked !== this.asked) return;
    fill(
      this.words,
      compared
        ? [series && inSeries(series), sentences(compared), differences(compared)]
        : el("p", { class: "hint" }, "These cannot be compared as they are; the line above says why."),
    );
  }
}

/** How far the downstream device trips alone, for each kind of fault. */
function inSeries({ upstream, downstream, cases, notes }) {
  const told = cases.map(({ fault, holds_from_a: from, holds_up_to: { status, value, interval }, beyond }) => {
    const name = fault[0].toUpperCase() + fault.slice(1);
    if (value === null) return `${name}: it is ${status.replaceAll("_", " ")} whether ${downstream} trips alone.`;
    const [end, spread] = withInterval(value, interval, amperes);
    return `${name}: ${downstream} trips alone${from ? ` from ${current(from)}` : ""} ${status === "at_least" ? "at least up to" : "up to"} ${end}${spread && ` (${spread})`}${beyond ? `; beyond that it is ${beyond.replaceAll("_", " ")}` : ""}.`;
  });
  return el(
    "div",
    { class: "sentences" },
    el("h3", {}, `${upstream} upstream, ${downstream} downstream`),
    told.map((each) => el("p", {}, each)),
    notes.map((note) => el("p", { class: "hint" }, plain(note))),
  );
}

function sentences({ pairs }) {
  return el(
    "ul",
    { class: "sentences" },
    pairs.map((pair) => el("li", {}, ...sentence(pair))),
  );
}

function sentence(pair) {
  const told = [reach(pair.b, pair.a, pair.b_clears_first), reach(pair.a, pair.b, pair.a_clears_first)].filter(Boolean);
  const crossings = pair.contacts.length
    ? ` The bands touch at ${pair.contacts
        .slice(0, 4)
        .map((each) => current(each))
        .join(", ")}.`
    : "";
  return [
    told.join(" ") || `Nowhere does one of ${pair.a} and ${pair.b} surely clear before the other may act.`,
    crossings,
  ];
}

function reach(first, other, { status, from, up_to: upTo, interval }) {
  if (from === null || upTo === null) return "";
  const [end, spread] = withInterval(upTo, interval, amperes);
  return `${first} clears before ${other} may act from ${current(from)} ${status === "at_least" ? "at least up to" : "up to"} ${end}${spread && ` (${spread})`}.`;
}

function differences({ devices, current: currents, times, pairs }) {
  const shown = [
    ...new Set(Array.from({ length: ROWS }, (_, k) => Math.round((k * (currents.length - 1)) / (ROWS - 1)))),
  ];
  const two = devices.length === 2;
  const heads = [["Current"], ...devices.map((key, index) => [key, index]), ...(two ? [["Surely first"]] : [])];
  const row = (k) =>
    el(
      "tr",
      {},
      el("th", { scope: "row" }, current(currents[k])),
      times.map((answer) => el("td", { class: "number" }, span(answer, k))),
      two && el("td", {}, first(pairs[0], pairs[0].sooner[k])),
    );
  return el(
    "table",
    {},
    el(
      "thead",
      {},
      el(
        "tr",
        {},
        heads.map(([words, index]) =>
          el(
            "th",
            { scope: "col" },
            index === undefined ? null : el("span", { class: `letter d${index + 1}` }, "ABCDEFGH"[index]),
            words,
          ),
        ),
      ),
    ),
    el("tbody", {}, shown.map(row)),
  );
}

function first(pair, sooner) {
  if (sooner === "undecided") return "undecided";
  return sooner === "not_covered" ? "not covered" : sooner;
}

function span({ fast, slow, mean }, k) {
  if (!fast && !slow && mean) return `mean ${one(mean, k)}`;
  const [from, to] = [one(fast, k), one(slow, k)];
  return from === to ? from : `${from} – ${to}`;
}

const SIGNS = { at_least: "≥\u00a0", at_most: "≤\u00a0" };

function one(edge, k) {
  if (!edge) return "not known";
  const [status, value] = [edge.status[k], edge.value[k]];
  return value === null ? status.replaceAll("_", " ") : `${SIGNS[status] ?? ""}${time(value)}`;
}
