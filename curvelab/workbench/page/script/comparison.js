// Two to eight devices side by side: their bands on one pair of axes, and under it what differs.

import { get, query } from "./api.js";
import { BandPane } from "./band-pane.js";
import { bandsOf, togetherOf } from "./bands-of.js";
import { button, el, fill } from "./dom.js";
import { attempt } from "./say.js";
import { current, time } from "./words.js";

const ROWS = 12;

export class Comparison {
  constructor() {
    this.pane = new BandPane("Bands side by side.");
    this.head = el("header", { class: "comparison-head" });
    this.words = el("div", { class: "comparison-words", tabindex: 0, role: "region", "aria-label": "Differences" });
    this.hint = el("p", { class: "comparison-hint hint" });
    this.node = el("section", { class: "comparison", "aria-label": "Side by side" }, this.head, this.pane.node, this.words, this.hint);
  }

  async show(keys, clear) {
    this.node.hidden = !keys.length;
    const enough = keys.length > 1;
    this.node.classList.toggle("waiting-for-more", !enough);
    this.hint.textContent = enough ? "" : "Tick one more device to see both side by side.";
    if (!enough) return;
    const asked = (this.asked = String(keys));
    fill(this.head, el("h2", {}, "Side by side"), keys.map((key, index) => el("span", { class: "subject" }, el("span", { class: `letter d${index + 1}` }, "ABCDEFGH"[index]), key)), button("Clear", clear, { class: "plain" }));
    const answers = await attempt(() => Promise.all(keys.map((key) => bandsOf(key))));
    if (!answers || asked !== this.asked) return;
    this.pane.show(togetherOf(answers, keys));
    const compared = await attempt(() => get(query("/compare", { key: keys })));
    if (asked !== this.asked) return;
    fill(this.words, compared ? [sentences(compared), differences(compared)] : el("p", { class: "hint" }, "These cannot be compared as they are; the line above says why."));
  }
}

function sentences({ pairs }) {
  return el("ul", { class: "sentences" }, pairs.map((pair) => el("li", {}, ...sentence(pair))));
}

function sentence(pair) {
  const told = [reach(pair.b, pair.a, pair.b_clears_first), reach(pair.a, pair.b, pair.a_clears_first)].filter(Boolean);
  const crossings = pair.contacts.length ? ` The bands touch at ${pair.contacts.slice(0, 4).map((each) => current(each)).join(", ")}.` : "";
  return [told.join(" ") || `Nowhere does one of ${pair.a} and ${pair.b} surely clear before the other may act.`, crossings];
}

function reach(first, other, { status, from, up_to: upTo, interval }) {
  if (from === null || upTo === null) return "";
  const spread = interval ? ` (${current(interval[0])} to ${current(interval[1])})` : "";
  return `${first} clears before ${other} may act from ${current(from)} ${status === "at_least" ? "at least up to" : "up to"} ${current(upTo)}${spread}.`;
}

function differences({ devices, current: currents, times, pairs }) {
  const shown = [...new Set(Array.from({ length: ROWS }, (_, k) => Math.round((k * (currents.length - 1)) / (ROWS - 1))))];
  const two = devices.length === 2;
  const heads = [["Current"], ...devices.map((key, index) => [key, index]), ...(two ? [["Surely first"]] : [])];
  const row = (k) =>
    el("tr", {}, el("th", { scope: "row" }, current(currents[k])), times.map((answer) => el("td", { class: "number" }, span(answer, k))), two && el("td", {}, first(pairs[0], pairs[0].sooner[k])));
  return el("table", {}, el("thead", {}, el("tr", {}, heads.map(([words, index]) => el("th", { scope: "col" }, index === undefined ? null : el("span", { class: `letter d${index + 1}` }, "ABCDEFGH"[index]), words)))), el("tbody", {}, shown.map(row)));
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
