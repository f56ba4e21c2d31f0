// Who is at work here: asked once, remembered by this browser alone, and always shown where it is signed with.

import { el, field } from "./dom.js";

const KEPT = "curvelab-name";

export function nameField(label = "Your name") {
  const input = el("input", {
    type: "text",
    autocomplete: "name",
    required: true,
    maxlength: 120,
    value: localStorage.getItem(KEPT) ?? "",
  });
  return { node: field(label, input), input };
}

/** The name as signed with; remembered when it is not empty. */
export function ownName(text) {
  const name = text.trim();
  if (name) localStorage.setItem(KEPT, name);
  return name;
}
