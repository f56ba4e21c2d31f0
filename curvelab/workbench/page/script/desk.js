// The desk: one sheet being read. The strip on top, the sheet left, what is open in the middle, the twin right.

import { Cursor } from "./cursor.js";
import { el, fill, settled } from "./dom.js";
import { Draft } from "./draft.js";
import { drawerIs, refreshDrawer, toggleDrawer } from "./drawer.js";
import { findingsList, summary } from "./findings.js";
import { historyList } from "./history.js";
import { isOf } from "./limits.js";
import { OpenList } from "./open-list.js";
import { pagesOf } from "./pages.js";
import { Parts } from "./parts.js";
import { Plate } from "./plate.js";
import { Progress } from "./progress.js";
import { keepPlace } from "./route.js";
import { said } from "./say.js";
import { SheetPane } from "./sheet.js";
import { Shown } from "./shown.js";
import { Store } from "./store.js";
import { Strip } from "./strip.js";
import { Together } from "./together.js";
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
    this.shown = new Shown(this.draft, () => this.strip.index);
    this.sheet = new SheetPane(this);
    this.twin = new TwinPane(this);
    this.together = new Together(this.draft, this.sheet, this.twin);
    this.openList = new OpenList(this);
    this.parts = new Parts(this);
    this.progress = new Progress(this.draft);
    this.store = new Store(this);
    this.text = new WorksheetText(this.draft);
    this.findings = el("section", { class: "checks", "aria-label": "Checks" });
    this.pages = el("div", { class: "pages" });
    this.sheet.node.append(this.pages);
    const middle = el(
      "section",
      { class: "middle", "aria-label": "What was read" },
      this.progress.node,
      this.openList.node,
      this.store.node,
      this.parts.node,
      this.findings,
    );
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
    const findings = this.shown.findings;
    const told = JSON.stringify(findings);
    if (told === this.findingsShown) return;
    this.findingsShown = told;
    fill(
      this.findings,
      el("h2", {}, "Checks"),
      findings.length > 0 && el("p", { class: "hint" }, `${summary(findings)}.`),
      findingsList(findings, (finding) => this.#look(finding)),
    );
  }

  #look(finding) {
    this.twin.chosen = finding;
    const limit = this.shown.limits.find((each) => isOf(each, finding));
    if (limit) this.cursor.atValues([limit.current, limit.time], "finding");
    else this.twin.canvas.redraw();
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

  sheetMoved() {
    this.remember?.();
    this.together?.sheetMoved();
  }

  #remember() {
    const { view } = this.sheet;
    if (view?.width) keepPlace({ x: view.x.toFixed(1), y: view.y.toFixed(1), z: view.scale.toPrecision(6) });
  }

  showWorksheet() {
    if (!this.draft.state) return;
    toggleDrawer("worksheet", "Worksheet", () => this.text.build());
  }

  showHistory() {
    if (!this.draft.state) return;
    toggleDrawer("history", "What was done", () => historyList(this.draft));
  }

  giveUp() {
    this.sheet.acts.giveUp();
    this.choose(null);
  }
}

function viewFrom({ x, y, z }) {
  const view = { x: Number(x), y: Number(y), scale: Number(z) };
  return Object.values(view).every((each) => Number.isFinite(each)) && view.scale > 0 ? view : null;
}
