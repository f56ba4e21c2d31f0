// One draft as the process has it: followed by a long poll, changed by one change after the other.

import { get, part, post, query, Refusal } from "./api.js";
import { Plane } from "./plane.js";
import { refused, said } from "./say.js";

const WAIT_S = 20;
const PAUSE_MS = 1500;

export class Draft extends EventTarget {
  constructor(id) {
    super();
    this.id = id;
    this.state = null;
    this.reading = null;
    this.plane = null;
    this.queue = Promise.resolve();
    this.stopped = new AbortController();
  }

  get path() {
    return `/drafts/${part(this.id)}`;
  }

  async open() {
    this.#take(await get(this.path, { signal: this.stopped.signal }));
    this.#follow();
  }

  close() {
    this.stopped.abort();
  }

  async #follow() {
    const { signal } = this.stopped;
    while (!signal.aborted) {
      try {
        const asked = { since: this.state.tick, wait: WAIT_S, have: this.state.reading_version };
        this.#take(await get(query(this.path, asked), { signal }));
      } catch (error) {
        if (signal.aborted) return;
        if (error.status === 404) return void this.dispatchEvent(new CustomEvent("gone", { detail: error }));
        await new Promise((done) => setTimeout(done, PAUSE_MS));
      }
    }
  }

  #take(state) {
    if (this.stopped.signal.aborted) return;
    if (this.state && state.tick < this.state.tick) return;
    if ("reading" in state && state.reading !== this.reading) {
      this.reading = state.reading;
      this.plane = state.reading?.axes ? new Plane(state.reading.axes) : null;
    }
    this.state = state;
    this.dispatchEvent(new Event("state"));
  }

  /** Make one change; true when it was made. What was done is told with a way back. */
  change(change) {
    const done = this.queue.then(() => this.#send(change));
    this.queue = done.catch(() => {});
    return done;
  }

  async #send(change) {
    const body = { base_version: this.state.version, change };
    try {
      this.#take(await post(query(`${this.path}/changes`, { have: this.state.reading_version }), body));
    } catch (error) {
      if (!(error instanceof Refusal)) throw error;
      if (error.status !== 409) return (refused(error), false);
      this.#take(await get(this.path));
      said(
        "This sheet was changed in another tab. What you see now is the newest state; please do your last step again.",
      );
      return false;
    }
    const last = this.state.history[this.state.position];
    if (change.kind === "undo") said("One step back.");
    else if (change.kind === "redo") said("One step forward again.");
    else if (last) said(`${last.text}.`, { label: "Undo", act: () => this.undo() });
    return true;
  }

  /** Resolves once every change is made and the newest worksheet read, or reading has ended otherwise. */
  async settled() {
    await this.queue;
    while (this.state.work.state === "reading") {
      await new Promise((done) => this.addEventListener("state", done, { once: true }));
    }
  }

  undo() {
    return this.state.can_undo ? this.change({ kind: "undo" }) : said("There is nothing to undo.");
  }

  redo() {
    return this.state.can_redo ? this.change({ kind: "redo" }) : said("There is nothing to redo.");
  }

  /** The worksheet's entry of a curve of the reading. */
  entryOf(curve, index) {
    return this.state.data?.curves?.[curve.entry ?? index] ?? null;
  }
}
