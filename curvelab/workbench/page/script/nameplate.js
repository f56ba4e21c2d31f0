// What a stored device's plate says, in a few words each.

import { el } from "./dom.js";
import { current, KINDS } from "./words.js";

const FIELDS = [
  ["kind", "Kind", (value) => KINDS[value] ?? value],
  ["characteristic", "Characteristic"],
  ["rated_current_a", "Rated current", (value) => current(value)],
  ["rated_residual_current_a", "Rated residual current", (value) => current(value)],
  ["standard", "Standard"],
  ["rated_voltage_v", "Voltage", (value) => `${value}\u00a0V`],
  ["maker", "Maker"],
  ["series", "Series"],
];

export function platesOf({ nameplate }) {
  const told = FIELDS.filter(
    ([name]) => nameplate[name] !== null && nameplate[name] !== undefined && nameplate[name] !== "",
  );
  const breaking = (nameplate.breaking ?? []).map((each) => [
    each.quantity,
    `${current(each.value_a)}${each.voltage_v ? ` at ${each.voltage_v}\u00a0V` : ""}`,
  ]);
  const rows = [
    ...told.map(([name, label, write]) => [label, write ? write(nameplate[name]) : nameplate[name]]),
    ...breaking,
  ];
  return el(
    "dl",
    { class: "plates" },
    rows.map(([label, value]) => el("div", {}, el("dt", {}, label), el("dd", {}, String(value)))),
  );
}
