// What the page says in passing: the last step with its way back, and refusals in one line. Both are live regions.

import { button, el, fill } from "./dom.js";

const LASTS_MS = 9000;
let timer = 0;

/** Tell what happened; `way` = { label, act } offers a way back. */
export function said(text, way = null) {
  clearTimeout(timer);
  forgiven();
  const place = document.getElementById("said");
  fill(place, el("span", {}, text), way && button(way.label, () => (hush(), way.act()), { class: "plain" }));
  place.classList.add("shown");
  timer = setTimeout(hush, LASTS_MS);
}

export function hush() {
  const place = document.getElementById("said");
  place.classList.remove("shown");
}

/** Show a refusal: what is wrong, what was expected, what to do. It stays until it is closed or something succeeds. */
export function refused(error) {
  const place = document.getElementById("refused");
  const [first, ...rest] = error.line
    ? [error.problem, error.expected && `Expected: ${error.expected}`, error.fix]
    : [String(error.message ?? error)];
  fill(
    place,
    el("strong", {}, ended(first)),
    rest.filter(Boolean).map((each) => el("span", {}, ended(each))),
    button("Close", () => place.classList.remove("shown"), { class: "plain" }),
  );
  place.classList.add("shown");
}

function forgiven() {
  document.getElementById("refused").classList.remove("shown");
}

function ended(text) {
  return /[.!?…]$/.test(text) ? text : `${text}.`;
}

/** Run what may be refused; the refusal is shown, and null comes back. */
export async function attempt(work) {
  try {
    return await work();
  } catch (error) {
    if (error.name === "AbortError") return null;
    if (!("line" in error)) throw error;
    refused(error);
    return null;
  }
}
