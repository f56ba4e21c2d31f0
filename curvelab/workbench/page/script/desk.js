// The desk: one sheet being read. The strip on top, the sheet left, what is open in the middle, the twin right.

import { edgesOf } from "./bands.js";
import { Cursor } from "./cursor.js";
import { el, fill, settled } from "./dom.js";
import { Draft } from "./draft.js";
import { drawerIs, refreshDrawer, toggleDrawer } from "./drawer.js";
import { findingsList, summary } from "./findings.js";
import { historyList } from "./history.js";
import { isOf, limitsOf } from "./limits.js";
import { OpenList } from "./open-list.js";
import { pagesOf } from "./pages.js";
import { Parts } from "./parts.js";
import { Plate } from "./plate.js";
import { Progress } from "./progress.js";
import { keepPlace } from "./route.js";
import { said } from "./say.js";
import { SheetPane } from "./sheet.js";
import { Store } from "./store.js";
import { Strip } from "./strip.js";
import { TwinPane } from "./twin.js";
import { WorksheetText } from "./worksheet.js";

export class Desk {
  constructor(id, place) {
    this.draft = new Draft(id);
    this.cursor = new Cursor(this.draft);
    this.chosen = null;
    this.opened = null;
    this.bare = false;
    this.wantedView = viewFrom(place);
    this.strip = new Strip(this);
    this.sheet = new SheetPane(this);
    this.twin = new TwinPane(this);
    this.openList = new OpenList(this);
    this.parts = new Parts(this);
    this.progress = new Progress(this.draft);
    this.store = new Store(this);
    this.text = new WorksheetText(this.draft);
    this.findings = el("section", { class: "checks", "aria-label": "Checks" });
    this.pages = el("div", { class: "pages" });
    this.sheet.node.append(this.pages);
    const middle = el("section", { class: "middle", "aria-label": "What was read" }, this.progress.node, this.openList.node, this.store.node, this.parts.node, this.findings);
    const views = el("div", { class: "views" }, this.sheet.node, middle, this.twin.node);
    this.name = el("h1", { class: "unseen" }, "Sheet");
    this.node = el("div", { class: "desk" }, this.name, this.strip.node, views);
    this.plate = new Plate(this, { sheet: this.sheet, twin: this.twin });
    this.draft.addEventListener("state", () => this.refresh());
    this.draft.addEventListener("gone", () => {
      said("This sheet is no longer on the desk; it was put away in another tab.");
      location.hash = "#/";
    });
    this.remember = settled(() => this.#remember(), 400);
  }

  async open() {
    await this.draft.open();
    this.name.textContent = this.draft.state.name;
    document.title = `${this.draft.state.name} – curvelab`;
  }

  close() {
    this.draft.close();
    this.plate.node.remove();
  }

  refresh() {
    const { state } = this.draft;
    if (!state) return;
    this.node.classList.toggle("stale", Boolean(state.stale));
    this.node.dataset.work = state.work.state;
    this.node.dataset.reading = state.reading_version;
    this.node.classList.toggle("no-sheet", !state.sheet);
    this.strip.update();
    this.sheet.update();
    this.twin.update();
    this.openList.update();
    this.parts.update();
    this.progress.update();
    this.store.update();
    this.#checks();
    pagesOf(this.pages, this.draft);
    this.text.update();
    if (drawerIs("history")) refreshDrawer("history");
  }

  #checks() {
    const findings = this.#ownFindings();
    const told = JSON.stringify(findings);
    if (told === this.findingsShown) return;
    this.findingsShown = told;
    fill(this.findings, el("h2", {}, "Checks"), findings.length > 0 && el("p", { class: "hint" }, `${summary(findings)}.`), findingsList(findings, (finding) => this.#look(finding)));
  }

  #look(finding) {
    this.twin.chosen = finding;
    const limit = this.shownLimits().find((each) => isOf(each, finding));
    if (limit) this.cursor.atValues([limit.current, limit.time], "finding");
    else this.twin.canvas.redraw();
  }

  get shownDevice() {
    return this.draft.state?.data?.devices?.[this.strip.index] ?? null;
  }

  /** Bands of the device the strip shows; of the first of a series. */
  shownBands() {
    const bands = this.draft.reading?.bands ?? [];
    const key = this.#shownKey(bands.map((band) => band.device));
    return bands.filter((band) => band.device === key);
  }

  /** Bands of the other devices on the sheet, each form once: a series has one band for all. */
  otherBands() {
    const shown = this.shownBands();
    const seen = new Set(shown.map(formOf));
    return (this.draft.reading?.bands ?? []).filter((band) => {
      const form = formOf(band);
      if (seen.has(form) || band.base !== shown[0]?.base) return false;
      return seen.add(form);
    });
  }

  #shownKey(keys) {
    const device = this.shownDevice;
    if (!device?.key || keys.includes(device.key)) return device?.key ?? keys[0];
    const rating = device.ratings?.[0];
    const own = rating === undefined ? null : device.key.replace("{rating}", String(rating));
    return keys.includes(own) ? own : keys[0];
  }

  #ownFindings() {
    const { findings = [] } = this.draft.state ?? {};
    const key = this.#shownKey(findings.map((each) => each.device));
    return findings.filter((each) => each.device === key);
  }

  shownLimits() {
    const { limits = [] } = this.draft.state ?? {};
    return limitsOf(limits, this.#shownKey(limits.map((each) => each.device)));
  }

  choose(index) {
    this.chosen = index;
    const { data } = this.draft.state ?? {};
    const device = data?.devices?.findIndex((each) => each.key === data.curves?.[index]?.device) ?? -1;
    if (device >= 0 && device !== this.strip.index) this.strip.turnTo(device);
    this.parts.update();
    this.sheet.canvas.redraw();
  }

  chooseNext() {
    const many = Math.max(this.draft.state.data?.curves?.length ?? 0, this.draft.reading?.curves?.length ?? 0);
    if (!many) return said("No line was read yet.");
    const next = this.chosen === null ? 0 : this.chosen + 1;
    return this.choose(next < many ? next : null);
  }

  undo() {
    return this.draft.undo();
  }

  redo() {
    return this.draft.redo();
  }

  /** Lay the paper bare in both views, or cover it again. */
  lay(bare) {
    if (bare === this.bare) return;
    this.bare = bare;
    this.node.classList.toggle("bare", bare);
    this.sheet.canvas.redraw();
    this.twin.canvas.redraw();
    this.plate.update();
  }

  // The views move together. ---------------------------------------------------------------------------------------

  sheetMoved() {
    this.remember?.();
    const { plane } = this.draft;
    if (!plane || this.leading) return;
    const [x0, y0, x1, y1] = this.sheet.view.box;
    const [fx0, fy0, fx1, fy1] = plane.frame;
    const seen = [Math.max(x0, fx0), Math.max(y0, fy0), Math.min(x1, fx1), Math.min(y1, fy1)];
    if (seen[2] - seen[0] < 1e-6 || seen[3] - seen[1] < 1e-6) return;
    const corners = [[seen[0], seen[1]], [seen[2], seen[3]], [seen[0], seen[3]], [seen[2], seen[1]]].map((place) => plane.scaled(place));
    const whole = x0 <= fx0 && y0 <= fy0 && x1 >= fx1 && y1 >= fy1;
    this.twin.follow(whole ? null : [0, 1].map((i) => [Math.min(...corners.map((each) => each[i])), Math.max(...corners.map((each) => each[i]))]));
  }

  twinMoved(window, full) {
    const { plane } = this.draft;
    if (!plane || !this.sheet.view?.width) return;
    const whole = window.every(([low, high], i) => high - low > 0.999 * (full[i][1] - full[i][0]));
    const corners = window[0].flatMap((u) => window[1].map((v) => plane.placeOfScaled([u, v]))).filter(Boolean);
    if (!corners.length) return;
    this.leading = true;
    if (whole) this.sheet.whole();
    else {
      this.sheet.view.show([...[0, 1].map((i) => Math.min(...corners.map((each) => each[i]))), ...[0, 1].map((i) => Math.max(...corners.map((each) => each[i])))], 0);
      this.sheet.moved();
    }
    this.leading = false;
  }

  #remember() {
    const { view } = this.sheet;
    if (view?.width) keepPlace({ x: view.x.toFixed(1), y: view.y.toFixed(1), z: view.scale.toPrecision(6) });
  }

  // Drawers. -------------------------------------------------------------------------------------------------------

  showWorksheet() {
    if (!this.draft.state) return;
    toggleDrawer("worksheet", "Worksheet", () => this.text.build());
  }

  showHistory() {
    if (!this.draft.state) return;
    toggleDrawer("history", "What was done", () => historyList(this.draft));
  }

  giveUp() {
    this.sheet.giveUp();
    this.choose(null);
  }
}

/** What tells one band's lines from another's: where each begins and ends. */
function formOf(band) {
  return JSON.stringify(edgesOf(band).map(([edge, { parts }]) => [edge, parts[0].current[0], parts.at(-1).current.at(-1)]));
}

function viewFrom({ x, y, z }) {
  const view = { x: Number(x), y: Number(y), scale: Number(z) };
  return Object.values(view).every((each) => Number.isFinite(each)) && view.scale > 0 ? view : null;
}
