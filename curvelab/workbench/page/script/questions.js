// The questions a calculator answers about one device: a small form each, the outcome with its findings and figures.

import { get, part, query } from "./api.js";
import { el, field, fill } from "./dom.js";
import { findingsList } from "./findings.js";
import { attempt } from "./say.js";
import { byUnit, plain, withInterval } from "./words.js";

const QUESTIONS = [
  {
    path: "disconnection",
    words: "Disconnects a fault in time?",
    fields: [
      { name: "voltage_v", words: "Voltage, V", first: "230" },
      { name: "system", words: "System", of: ["TN", "TT"] },
      { name: "practice", words: "Practice", of: ["bs7671", "iec60364", "asnzs3000"] },
      { name: "loop_ohm", words: "Loop, Ω" },
    ],
  },
  {
    path: "withstand",
    words: "Does a conductor withstand it?",
    fields: [
      { name: "area_mm2", words: "Area, mm²" },
      { name: "material", words: "Material", of: ["copper", "aluminium"] },
      {
        name: "insulation",
        words: "Insulation",
        of: ["pvc70", "pvc90", "xlpe90", "rubber60", "mineral70", "mineral105"],
      },
      { name: "least_a", words: "Least fault, A" },
      { name: "greatest_a", words: "Greatest fault, A" },
    ],
  },
  {
    path: "overload",
    words: "Protects a line against overload?",
    fields: [
      { name: "design_a", words: "Design current, A" },
      { name: "capacity_a", words: "Line carries, A" },
    ],
  },
  {
    path: "breaking",
    words: "Breaks the short circuit?",
    fields: [
      { name: "prospective_a", words: "Prospective, A" },
      { name: "voltage_v", words: "Voltage, V", first: "230" },
    ],
  },
];

const FIGURES = {
  trips: "Surely trips from",
  time: "Trips within",
  greatest_loop: "Greatest loop",
  greatest_measured_loop: "Greatest measured loop",
  let_through: "Lets through",
  least_area: "Least area",
  least_capacity: "Line must carry",
  capacity: "Breaks up to",
  back_up_capacity: "With its back-up",
};

/** The questions as folded parts; `settings()` gives what the device is set to. */
export function questionsOf(key, settings) {
  return QUESTIONS.map((question) => {
    const answer = el("div", { class: "answer", role: "status" });
    const form = el(
      "form",
      { class: "question", onsubmit: (event) => ask(event, key, question, settings(), answer) },
      question.fields.map(input),
      el("button", { type: "submit" }, "Ask"),
    );
    return el("details", {}, el("summary", {}, question.words), form, answer);
  });
}

function input({ name, words, of, first }) {
  if (of)
    return field(
      words,
      el(
        "select",
        { name },
        of.map((each) => el("option", { value: each }, each)),
      ),
    );
  return field(
    words,
    el("input", { type: "text", inputmode: "decimal", name, autocomplete: "off", value: first ?? "" }),
  );
}

async function ask(event, key, { path }, settings, node) {
  event.preventDefault();
  const asked = Object.fromEntries(
    [...new FormData(event.target)].map(([name, value]) => [name, value.trim().replace(",", ".")]),
  );
  const answer = await attempt(() => get(query(`/devices/${part(key)}/${path}`, { ...asked, set: settings })));
  if (answer)
    fill(
      node,
      figures(answer),
      answer.findings.length > 0 && findingsList(answer.findings),
      (answer.notes ?? []).map((note) => el("p", { class: "hint" }, plain(String(note.text ?? note)))),
    );
}

function figures(answer) {
  const rows = Object.entries(FIGURES)
    .filter(([name]) => answer[name]?.status)
    .map(([name, words]) => el("div", {}, el("dt", {}, words), el("dd", {}, figure(answer[name]))));
  return el("dl", { class: "answers-told" }, rows);
}

function figure({ status, value, interval, unit, reason }) {
  if (value === null) return [status.replaceAll("_", " "), reason && el("small", {}, ` ${plain(reason)}`)];
  const sign = { at_least: "≥\u00a0", at_most: "≤\u00a0" }[status] ?? "";
  const [shown, spread] = withInterval(value, interval, (each, digits) => byUnit(each, unit, digits));
  return [el("b", {}, sign + shown), spread && el("small", {}, ` ${spread}`)];
}
