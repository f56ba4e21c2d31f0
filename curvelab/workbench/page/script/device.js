// One stored device: the paper it came from left, what is known and decided in the middle, its band right.

import { get, part, query } from "./api.js";
import { Asking } from "./asking.js";
import { BandPane } from "./band-pane.js";
import { bandsOf, togetherOf } from "./bands-of.js";
import { button, el, fill } from "./dom.js";
import { findingsList, summary } from "./findings.js";
import { limitsOf } from "./limits.js";
import { platesOf } from "./nameplate.js";
import { Review } from "./review.js";
import { attempt } from "./say.js";
import { takeStored } from "./take-in.js";
import { moment } from "./words.js";

export class DeviceView {
  constructor(key) {
    this.key = key;
    this.pane = new BandPane("Its band on exact axes.");
    this.evidence = el("section", { class: "pane evidence", "aria-label": "Evidence" });
    this.middle = el("section", { class: "middle", "aria-label": "Device" });
    this.head = el("section", { class: "strip device-head", "aria-label": "Nameplate" });
    this.node = el(
      "div",
      { class: "desk device" },
      this.head,
      el("div", { class: "views" }, this.evidence, this.middle, this.pane.node),
    );
    this.asking = new Asking(key, (settings) => this.#bands(settings));
    this.review = new Review(() => this.open());
  }

  async open() {
    document.title = `${this.key} – curvelab`;
    const [device, history] = await Promise.all([
      get(`/devices/${part(this.key)}`),
      get(`/devices/${part(this.key)}/history`),
    ]);
    Object.assign(this, { device, history });
    this.pinned = `${device.key}@${device.revision}`;
    this.#heads();
    this.#evidence(device.readings?.find((each) => each.is_kept)?.number);
    this.#middle();
    await attempt(() => this.#bands([]));
  }

  async #bands(settings) {
    const { device } = this;
    const answer = await bandsOf(this.pinned, settings);
    const shown = togetherOf([answer], [device.key], limitsOf(device.limits, device.key));
    this.pane.show({ ...shown, subjects: shown.subjects.map((subject) => ({ ...subject, colour: "ink" })) });
    this.pane.empty.textContent = shown.full ? "" : "This device has no curve.";
  }

  #heads() {
    const { device, history } = this;
    const revisions = [...new Set(history.map((each) => each.revision))];
    const pick = el("select", {
      "aria-label": "Revision",
      "data-focus": "revision",
      onchange: (event) => (location.hash = `#/device/${part(`${device.key}@${event.target.value}`)}`),
    });
    pick.append(
      ...revisions.map((revision) =>
        el("option", { value: revision, selected: revision === device.revision }, `Revision ${revision}`),
      ),
    );
    fill(
      this.head,
      el("h1", {}, device.key),
      el("span", { class: `state ${device.state}` }, device.state),
      pick,
      platesOf(device),
    );
  }

  #evidence(number) {
    const { readings = [] } = this.device;
    if (!readings.length)
      return fill(
        this.evidence,
        el("p", { class: "pane-empty" }, "This device was typed from a table; there is no sheet."),
      );
    const shown = readings.find((each) => each.number === number);
    const choice =
      readings.length > 1 &&
      readings.map((each) =>
        button(each.file ?? `Reading ${each.number}`, () => this.#evidence(each.number), {
          "aria-pressed": each.number === number,
          "data-focus": `reading-${each.number}`,
        }),
      );
    const again =
      shown?.is_kept &&
      button("Open on the desk", () => takeStored(this.pinned, shown.number), { "data-focus": "again" });
    const picture = shown?.is_kept
      ? el("img", {
          src: query(`/api/devices/${part(this.pinned)}/overlay.png`, { reading: shown.number }),
          alt: `The reading of ${device(shown)} over its sheet`,
          class: "overlay",
        })
      : el("p", { class: "pane-empty" }, "The sheet itself is not kept in the library.");
    return fill(
      this.evidence,
      el("div", { class: "pages" }, choice, again),
      el(
        "div",
        { class: "overlay-frame", tabindex: 0, role: "region", "aria-label": "Reading over its sheet" },
        el("p", { class: "pane-empty" }, "The reading is drawn over its sheet."),
        picture,
      ),
    );
  }

  #middle() {
    const { device } = this;
    const look = (finding) => {
      this.pane.chosen = finding;
      this.pane.canvas.redraw();
    };
    const decided = (device.findings ?? []).length > 0;
    fill(
      this.middle,
      this.review.node,
      el(
        "section",
        { class: "checks", "aria-label": "Checks" },
        el("h2", {}, "Checks"),
        decided && el("p", { class: "hint" }, `${summary(device.findings)}.`),
        decided ? findingsList(device.findings, look) : el("p", { class: "hint" }, "No check covers this device."),
      ),
      this.asking.node,
      el(
        "section",
        { "aria-label": "Cautions" },
        el("h2", {}, "Cautions"),
        el(
          "ul",
          { class: "cautions" },
          device.cautions.map((caution) => el("li", {}, caution)),
        ),
      ),
      el("section", { "aria-label": "History" }, el("h2", {}, "History"), this.#happened()),
      el("section", { "aria-label": "Take along" }, el("h2", {}, "Take along"), this.#exports()),
    );
    this.review.update(device);
    this.asking.update(device);
  }

  #happened() {
    const rows = [...this.history].reverse().map((entry) => {
      const what = `${entry.name || "Somebody"} ${did(entry)} revision ${entry.revision}`;
      const before =
        entry.action === "stored" &&
        entry.revision > 1 &&
        el(
          "a",
          {
            href: `#/library?with=${part(`${this.device.key}@${entry.revision - 1},${this.device.key}@${entry.revision}`)}`,
          },
          "Beside the one before",
        );
      return el(
        "li",
        {},
        el("span", {}, what),
        el("small", {}, [moment(entry.when), entry.reason].filter(Boolean).join(" · ")),
        before,
      );
    });
    return el("ol", { class: "happened" }, rows);
  }

  #exports() {
    const files = [
      ["Review document (PDF)", this.pinned, "report.pdf"],
      ["Review document (one HTML file)", this.pinned, "report.html"],
      ["Points as a table (CSV)", this.pinned, "points.csv"],
      ["All that is stored (JSON lines)", this.device.key, "export.jsonl"],
    ];
    const link = ([words, key, name]) =>
      el("li", {}, el("a", { href: `/api/devices/${part(key)}/${name}`, download: true }, words));
    return el("ul", { class: "exports" }, files.map(link));
  }
}

/** What happened, as a verb: stored, checked, released, withdrawn, made a draft again, noted. */
function did({ action, state }) {
  if (action !== "reviewed") return action === "noted" ? "noted something about" : action;
  return { withdrawn: "withdrew", draft: "sent back" }[state] ?? state;
}

const device = (reading) => reading.file ?? `reading ${reading.number}`;
