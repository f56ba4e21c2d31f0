// Outcomes of the checks against the standard, those that need a look first. Used for a draft and a stored device.

import { button, el } from "./dom.js";
import { byUnit, percent, plain, withInterval } from "./words.js";

const ORDER = ["fails", "undecided", "at limit", "not covered", "meets"];
const SIGNS = { meets: "✓", fails: "✕", undecided: "?", "at limit": "≈", "not covered": "–" };

/** A list of findings; `look(finding)` is called when one is chosen. */
export function findingsList(findings, look) {
  if (!findings.length)
    return el("p", { class: "hint" }, "No standard is checked yet: say kind, characteristic and standard.");
  const sorted = [...findings].sort((one, other) => rank(one) - rank(other));
  return el(
    "ul",
    { class: "findings" },
    sorted.map((finding) => row(finding, look)),
  );
}

const rank = (finding) => ORDER.indexOf(finding.outcome) + (finding.advisory ? 0.5 : 0);

function row(finding, look) {
  const write = (value, figures) => byUnit(value, finding.unit, figures);
  const [value, interval] = finding.value === null ? ["", ""] : withInterval(finding.value, finding.interval, write);
  const margin = finding.margin === null || finding.margin === undefined ? "" : `margin ${percent(finding.margin)}`;
  const go = button("", () => look?.(finding), { class: `finding ${finding.outcome.replace(" ", "-")}` });
  go.append(
    el("span", { class: "sign", "aria-hidden": "true" }, SIGNS[finding.outcome] ?? ""),
    el(
      "span",
      { class: "finding-words" },
      el("span", {}, plain(finding.requirement)),
      el(
        "small",
        {},
        [finding.outcome, finding.advisory && "advisory", value && `read ${value}`, interval && `(${interval})`, margin]
          .filter(Boolean)
          .join(" · "),
      ),
      finding.note && el("small", {}, plain(finding.note)),
      el("small", { class: "source" }, `${finding.standard}, ${finding.clause}`),
    ),
  );
  return el("li", {}, go);
}

/** "9 meet, 1 fails" */
export function summary(findings) {
  const words = {
    fails: ["fails", "fail"],
    undecided: ["is undecided", "are undecided"],
    "at limit": ["is at its limit", "are at their limit"],
    "not covered": ["is not covered", "are not covered"],
    meets: ["meets", "meet"],
  };
  return ORDER.map((outcome) => [outcome, findings.filter((each) => each.outcome === outcome).length])
    .filter(([, number]) => number)
    .map(([outcome, number]) => `${number} ${words[outcome][number === 1 ? 0 : 1]}`)
    .join(", ");
}
