// The page: a head with the two places one can be, and the view the address names.

import { closeDrawer } from "./drawer.js";
import { button, fill } from "./dom.js";
import { here } from "./route.js";
import { attempt } from "./say.js";
import { keysButton, watchKeys } from "./shortcuts.js";
import { Desk } from "./desk.js";
import { DeviceView } from "./device.js";
import { Library } from "./library.js";
import { Start } from "./start.js";
import { watchDrops } from "./take-in.js";

let shown = null;
let name = "";

const VIEWS = {
  start: () => new Start(),
  sheet: ({ rest, values }) => new Desk(rest[0], values),
  library: ({ values }) => new Library(values),
  device: ({ rest, values }) => new DeviceView(rest[0], values),
};

async function show() {
  const place = here();
  const wanted = [place.view, ...place.rest].join("/");
  if (wanted === name) return shown?.turned?.(place.values);
  name = wanted;
  closeDrawer();
  shown?.close?.();
  const view = (VIEWS[place.view] ?? VIEWS.start)(place);
  shown = view;
  fill(document.querySelector("main"), view.node);
  heads(place.view, view);
  const opened = await attempt(async () => (await view.open(), true));
  if (shown !== view) return undefined;
  if (opened === null && place.view !== "start") location.hash = place.view === "device" ? "#/library" : "#/";
  return heads(place.view, view);
}

function heads(view, shownView) {
  for (const link of document.querySelectorAll("header nav a")) {
    const current = link.getAttribute("href") === (["library", "device"].includes(view) ? "#/library" : "#/");
    if (current) link.setAttribute("aria-current", "page");
    else link.removeAttribute("aria-current");
  }
  const desk = shownView instanceof Desk ? shownView : null;
  const title = document.getElementById("title");
  title.textContent = desk?.draft.state?.name ?? "";
  fill(
    document.getElementById("acts"),
    desk && [
      button("Undo", () => desk.undo(), { "aria-keyshortcuts": "Control+Z", class: "plain" }),
      button("Redo", () => desk.redo(), { "aria-keyshortcuts": "Control+Shift+Z", class: "plain" }),
      button("History", () => desk.showHistory(), { class: "plain", "aria-keyshortcuts": "h" }),
      button("Worksheet", () => desk.showWorksheet(), { class: "plain", "aria-keyshortcuts": "w" }),
    ],
    keysButton(),
  );
}

window.addEventListener("hashchange", show);
watchDrops();
watchKeys(() => (shown instanceof Desk ? shown : null));
show();
