// The small plate beside the pointer: current, value and their intervals there, and what the edges say at that current.

import { el, fill } from "./dom.js";
import { edgesOf, valueAt } from "./bands.js";
import { current, EDGES, plusMinus, quantity } from "./words.js";

const NORMAL_95 = 1.959964;
const APART = 18;

export class Plate {
  /** `panes` = { sheet, twin }; the plate stands in the pane the pointer is in, and is read out when keys moved it. */
  constructor(desk, panes) {
    this.desk = desk;
    this.panes = panes;
    this.node = el("div", { class: "plate", hidden: true, "aria-hidden": "true" });
    this.spoken = document.getElementById("spoken");
    document.body.append(this.node);
    desk.cursor.addEventListener("move", () => this.update());
  }

  update() {
    const { cursor, draft, bare } = this.desk;
    this.node.hidden = !cursor.values || bare || cursor.values.some((each) => !Number.isFinite(each));
    if (this.node.hidden) return;
    fill(this.node, this.#lines(cursor, draft));
    this.#place(cursor);
    if (cursor.from === "keys") this.spoken.textContent = this.node.innerText.replaceAll("\n", ", ");
  }

  #lines({ values, place, from, near }, { plane }) {
    const base = plane?.base ?? this.desk.shown.bands[0]?.base ?? "A";
    const name = plane?.quantity ?? "time";
    const deviation = place && plane?.deviation(place);
    const write = [(value) => current(value, base), (value) => quantity(value, name)];
    const here = values.map((value, i) => {
      const log = (i ? plane?.value : plane?.current)?.scale === "log";
      const half = deviation ? NORMAL_95 * deviation[i] : null;
      return figure(write[i](value), half === null ? null : log ? 10 ** half - 1 : half / value);
    });
    const rows = [
      el(
        "div",
        { class: "plate-here" },
        here.map((each) => el("span", {}, each)),
      ),
    ];
    for (const [edge, answer] of this.#answers(values[0])) {
      rows.push(
        el(
          "div",
          { class: "plate-edge" },
          el("span", { class: `stroke ${edge}` }),
          el("span", {}, EDGES[edge]),
          el("span", {}, said(answer, write[1])),
        ),
      );
    }
    if (place && from === "sheet") {
      const act = near ? `Click: this ${EDGES[near.curve.edge]?.toLowerCase() ?? ""} line passes here` : null;
      if (act) rows.push(el("div", { class: "plate-act" }, act));
    }
    return rows;
  }

  #answers(at) {
    const seen = new Map();
    for (const band of this.desk.shown.bands) {
      for (const [edge, curve] of edgesOf(band)) {
        const answer = valueAt(curve, at, edge);
        if (!seen.get(edge)) seen.set(edge, answer);
      }
    }
    return seen;
  }

  #place({ from, place, values }) {
    const onTwin = from === "twin" || (from === "keys" && document.activeElement === this.panes.twin.canvasNode);
    const pane = onTwin ? this.panes.twin : this.panes.sheet;
    const box = pane.canvasNode.getBoundingClientRect();
    const at = onTwin ? pane.frame()?.pixel(...values) : place && pane.view?.toScreen(place);
    if (!at) return;
    const size = this.node.getBoundingClientRect();
    const right = at[0] + APART + size.width < box.width ? at[0] + APART : at[0] - APART - size.width;
    const below = at[1] + APART + size.height < box.height ? at[1] + APART : at[1] - APART - size.height;
    const left = Math.max(box.left + 4, Math.min(box.right - size.width - 4, box.left + right));
    this.node.style.transform = `translate(${left}px, ${Math.max(8, box.top + below)}px)`;
  }
}

function figure(words, share) {
  return [el("b", {}, words), share !== null && el("small", {}, plusMinus(share))];
}

function said(answer, write) {
  if (!answer) return el("small", {}, "not covered");
  if (answer.status === "at_least") return [el("b", {}, `≥ ${write(answer.value)}`)];
  return figure(write(answer.value), answer.interval && answer.interval[1] / answer.value - 1);
}
