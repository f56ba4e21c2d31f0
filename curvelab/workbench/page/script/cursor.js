// The one place both views speak of: on the sheet, and in current and value.

export class Cursor extends EventTarget {
  constructor(draft) {
    super();
    this.draft = draft;
    this.place = null;
    this.values = null;
    this.from = null;
  }

  /** Set from the sheet, by a place in the sheet's unit. */
  atPlace(place, from = "sheet", near = null) {
    const { plane } = this.draft;
    this.#set({ place, values: plane ? plane.values(place) : null, from, near });
  }

  /** Set from the twin, by current and value. */
  atValues(values, from = "twin") {
    const { plane } = this.draft;
    this.#set({ place: plane ? plane.place(...values) : null, values, from, near: null });
  }

  clear() {
    this.#set({ place: null, values: null, from: null, near: null });
  }

  #set(next) {
    Object.assign(this, next);
    this.dispatchEvent(new Event("move"));
  }
}
