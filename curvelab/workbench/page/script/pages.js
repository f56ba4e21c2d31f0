// Which page of the file and which plot of the page is on the desk, where there is a choice.

import { button, el, fill } from "./dom.js";

export function pagesOf(node, draft) {
  const { sheet } = draft.state;
  const many = sheet?.pages > 1;
  const plots = sheet?.plots?.length > 1 ? sheet.plots : [];
  node.hidden = !many && !plots.length;
  if (node.hidden) return;
  const to = (page) => draft.change({ kind: "page", page });
  fill(
    node,
    many && [
      button("‹", () => to(sheet.page - 1), {
        "aria-label": "Page before",
        disabled: sheet.page <= 1,
        "data-focus": "page-before",
      }),
      el("span", {}, `Page ${sheet.page} of ${sheet.pages}`),
      button("›", () => to(sheet.page + 1), {
        "aria-label": "Next page",
        disabled: sheet.page >= sheet.pages,
        "data-focus": "page-next",
      }),
    ],
    plots.map(({ plot }) =>
      button(`Plot ${plot}`, () => draft.change({ kind: "plot", plot }), {
        "aria-pressed": plot === sheet.plot,
        "data-focus": `plot-${plot}`,
      }),
    ),
  );
}
