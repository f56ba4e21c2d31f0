// A sheet comes in: dropped anywhere, pasted, chosen, or one of the demo sheets.

import { postBytes, post, query } from "./api.js";
import { attempt, hush, said } from "./say.js";

const MOST_BYTES = 200 * 1024 * 1024;

async function begun(path, bytes) {
  said("Opening the sheet.");
  const state = await attempt(() => (bytes ? postBytes(path, bytes) : post(path)));
  hush();
  return state;
}

async function opened(path, bytes) {
  const state = await begun(path, bytes);
  if (state) location.hash = `#/sheet/${encodeURIComponent(state.id)}`;
}

function taken(file, take) {
  if (file.size > MOST_BYTES) return said(`${file.name} is larger than 200 MB. Give the page with the curve alone.`);
  return take(query("/drafts", { name: file.name || "pasted.png" }), file);
}

/** One file goes on the desk; several are all begun, and listed where one comes in. */
export async function takeFiles(files) {
  if (files.length === 1) return taken(files[0], opened);
  for (const file of files) await taken(file, begun);
  if (files.length) location.hash = "#/?new";
  return undefined;
}

export const takeDemo = (name) => opened(query("/drafts", { demo: name }));

export const takeStored = (key, reading) => opened(query("/drafts", { device: key, reading }));

export function watchDrops() {
  const body = document.body;
  let depth = 0;
  const carries = (event) => event.dataTransfer?.types.includes("Files");
  body.addEventListener("dragenter", (event) => {
    if (!carries(event)) return;
    depth += 1;
    body.classList.add("dropping");
  });
  body.addEventListener("dragleave", (event) => {
    if (!carries(event)) return;
    depth -= 1;
    if (depth <= 0) body.classList.remove("dropping");
  });
  body.addEventListener("dragover", (event) => carries(event) && event.preventDefault());
  body.addEventListener("drop", (event) => {
    if (!carries(event)) return;
    event.preventDefault();
    depth = 0;
    body.classList.remove("dropping");
    takeFiles([...event.dataTransfer.files]);
  });
  document.addEventListener("paste", (event) => {
    const files = [...(event.clipboardData?.files ?? [])];
    if (!files.length) return;
    event.preventDefault();
    takeFiles(files);
  });
}
