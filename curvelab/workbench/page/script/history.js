// Everything done to a sheet, in plain words, the newest first; one click goes back to any of it.

import { button, el } from "./dom.js";

export function historyList(draft) {
  const { history, position, can_undo: canUndo, can_redo: canRedo } = draft.state;
  const go = async (index) => {
    const kind = index < position ? "undo" : "redo";
    for (let step = Math.abs(index - position); step > 0; step -= 1) if (!(await draft.change({ kind }))) return;
  };
  const row = (step, index) =>
    el(
      "li",
      {
        class: index === position ? "here" : index > position ? "undone" : "",
        "aria-current": index === position ? "step" : null,
      },
      el("span", {}, step.text),
      index === position
        ? el("small", {}, "now")
        : button(index < position ? "Back to here" : "Forward to here", () => go(index), {
            class: "plain",
            "data-focus": `step-${index}`,
          }),
    );
  const rows = history.map(row).reverse();
  return [
    el(
      "div",
      { class: "row-acts" },
      button("Undo", () => draft.undo(), { disabled: !canUndo, "data-focus": "history-undo" }),
      button("Redo", () => draft.redo(), { disabled: !canRedo, "data-focus": "history-redo" }),
    ),
    rows.length ? el("ol", { class: "steps" }, rows) : el("p", { class: "hint" }, "Nothing was done yet."),
  ];
}
