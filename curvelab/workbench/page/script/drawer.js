// A drawer at the page's edge, one at a time: the worksheet, the history, the keys.

import { button, el, fill } from "./dom.js";

let open = null;

/** Open the drawer of that name with what `build()` gives, or close it if it is the open one. */
export function toggleDrawer(name, title, build, opener = document.activeElement) {
  const was = open?.name;
  closeDrawer();
  if (was === name) return null;
  const body = el("div", { class: "drawer-body" });
  const head = el(
    "header",
    {},
    el("h2", { id: "drawer-title" }, title),
    button("Close", closeDrawer, { class: "plain" }),
  );
  const node = el("aside", { class: `drawer ${name}`, "aria-labelledby": "drawer-title", tabindex: -1 }, head, body);
  node.addEventListener("keydown", (event) => {
    if (event.key !== "Escape") return;
    event.stopPropagation();
    closeDrawer();
  });
  document.querySelector("main").append(node);
  document.body.dataset.drawer = name;
  open = { name, node, opener, body, build };
  fill(body, build(body));
  (body.querySelector("textarea, input, button") ?? node).focus({ preventScroll: true });
  return open;
}

export function closeDrawer() {
  if (!open) return;
  const { node, opener } = open;
  open = null;
  node.remove();
  delete document.body.dataset.drawer;
  if (opener?.isConnected) opener.focus({ preventScroll: true });
}

/** Build the open drawer anew if it is the one of that name. */
export function refreshDrawer(name) {
  if (open?.name === name) fill(open.body, open.build(open.body));
}

export const drawerIs = (name) => open?.name === name;
