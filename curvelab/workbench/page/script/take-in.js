// A sheet comes in: dropped anywhere, pasted, chosen, or one of the demo sheets.

import { postBytes, post, query } from "./api.js";
import { attempt, hush, said } from "./say.js";

const MOST_BYTES = 200 * 1024 * 1024;

async function opened(path, bytes) {
  said("Opening the sheet.");
  const state = await attempt(() => (bytes ? postBytes(path, bytes) : post(path)));
  hush();
  if (state) location.hash = `#/sheet/${encodeURIComponent(state.id)}`;
}

export function takeFile(file) {
  if (file.size > MOST_BYTES) return said(`${file.name} is larger than 200 MB. Give the page with the curve alone.`);
  return opened(query("/drafts", { name: file.name || "pasted.png" }), file);
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
    const [file] = event.dataTransfer.files;
    if (file) takeFile(file);
  });
  document.addEventListener("paste", (event) => {
    const file = [...(event.clipboardData?.files ?? [])][0];
    if (!file) return;
    event.preventDefault();
    takeFile(file);
  });
}
