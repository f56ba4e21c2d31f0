// The device strip: what the devices of this sheet will be called and are rated, typed in place; what was read says so.

import { button, el, field, fill } from "./dom.js";
import { KINDS, typedNumber } from "./words.js";

const STANDARDS = [
  "IEC 60898-1",
  "IEC 61009-1",
  "IEC 61008-1",
  "IEC 60947-2",
  "IEC 60269-2",
  "IEC 60255-151",
  "BS 88-2",
  "BS 88-3",
  "BS 3036",
  "BS 1362",
];
const CHARACTERISTICS = [
  "B",
  "C",
  "D",
  "K",
  "Z",
  "gG",
  "gM",
  "aM",
  "IEC inverse",
  "IEC very inverse",
  "IEC extremely inverse",
];
const RESIDUAL = new Set(["rcd", "rcbo"]);

export class Strip {
  constructor(desk) {
    this.desk = desk;
    this.node = el("section", { class: "strip", "aria-label": "Device" });
    this.shown = "";
    this.index = 0;
    this.begun = {};
  }

  update() {
    const { data, read_from_sheet: read = [] } = this.desk.draft.state;
    const devices = data?.devices ?? [];
    this.index = Math.min(this.index, Math.max(0, devices.length - 1));
    const text = JSON.stringify([devices, read, this.index]);
    if (text === this.shown) return;
    this.shown = text;
    const device = devices[this.index] ?? this.begun;
    const wasRead = (name) => read.includes(`devices.${this.index}.${name}`);
    const boxes = FIELDS.filter((each) => !each.when || each.when(device)).map((each) =>
      this.#box(each, device, wasRead(each.name)),
    );
    fill(this.node, devices.length > 1 && this.#which(devices), boxes, this.#adding(devices));
  }

  /** Take the keyboard to the first blank that is needed. */
  begin() {
    (this.node.querySelector(".needed input, .needed select") ?? this.node.querySelector("input"))?.focus();
  }

  #which(devices) {
    const pick = el("select", {
      "data-focus": "strip-which",
      onchange: (event) => this.turnTo(Number(event.target.value)),
    });
    pick.append(
      ...devices.map((device, index) => el("option", { value: index, selected: index === this.index }, device.key)),
    );
    return field("Device", pick);
  }

  turnTo(index) {
    this.index = index;
    this.update();
    this.desk.refresh();
  }

  #adding(devices) {
    if (!devices.length) return null;
    return button(
      "Another device",
      async () => {
        if (
          await this.desk.draft.change({
            kind: "set-device",
            device: null,
            fields: { key: freshKey(devices), kind: devices[0].kind },
          })
        )
          this.turnTo(devices.length);
      },
      { class: "plain strip-add", "data-focus": "strip-add" },
    );
  }

  #box({ name, label, size, options, number, hint }, device, read) {
    const value = name === "rated_current_a" && device.ratings ? device.ratings.join(", ") : (device[name] ?? "");
    const shared = { "data-focus": `strip-${name}`, onchange: (event) => this.#set(name, event.target.value, number) };
    const list = options && !Array.isArray(options) ? null : options && `list-${name}`;
    const input =
      options && !list
        ? el(
            "select",
            shared,
            el("option", { value: "" }, "—"),
            Object.keys(options).map((key) =>
              el("option", { value: key, selected: key === value, title: options[key] }, key),
            ),
          )
        : el("input", {
            type: "text",
            autocomplete: "off",
            spellcheck: "false",
            size,
            list,
            placeholder: hint,
            ...shared,
            value,
          });
    const lists =
      list &&
      el(
        "datalist",
        { id: list },
        options.map((each) => el("option", { value: each })),
      );
    const box = field(label, input);
    if (read) box.firstChild.append(el("i", { class: "as-read" }, "read"));
    if (lists) box.append(lists);
    box.classList.toggle("needed", !value && (name === "key" || name === "kind"));
    return box;
  }

  async #set(name, text, number) {
    const fields = fieldsOf(name, text.trim(), number, this.desk.draft.state.data?.devices?.[this.index]);
    const first = !this.desk.draft.state.data?.devices?.length;
    if (first) {
      // A device is written down as soon as it has a key and a kind.
      Object.assign(this.begun, fields);
      if (!this.begun.key || !this.begun.kind) return;
    }
    const change = {
      kind: "set-device",
      device: first ? null : this.index,
      fields: first ? withoutBlanks(this.begun) : fields,
    };
    this.shown = "";
    if (await this.desk.draft.change(change)) this.begun = {};
    this.update();
  }
}

/** Several ratings make a series. Text that is no number goes as it is; the process says what is wrong with it. */
function fieldsOf(name, text, number, device) {
  if (name === "rated_current_a" && /[,;]/.test(text)) {
    const ratings = text.split(/[,;]/).map((each) => typedNumber(each) ?? each.trim());
    return device?.rated_current_a === undefined ? { ratings } : { ratings, rated_current_a: null };
  }
  const fields = { [name]: text === "" ? null : number ? (typedNumber(text) ?? text) : text };
  return name === "rated_current_a" && device?.ratings ? { ...fields, ratings: null } : fields;
}

const withoutBlanks = (fields) => Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== null));

function freshKey(devices) {
  const taken = new Set(devices.map((device) => device.key));
  let number = devices.length + 1;
  while (taken.has(`device-${number}`)) number += 1;
  return `device-${number}`;
}

const FIELDS = [
  { name: "key", label: "Key", size: 24, hint: "its name in the library" },
  { name: "kind", label: "Kind", options: KINDS },
  { name: "characteristic", label: "Characteristic", size: 8, options: CHARACTERISTICS },
  { name: "rated_current_a", label: "Rated current, A", size: 8, number: true },
  {
    name: "rated_residual_current_a",
    label: "Rated residual current, A",
    size: 6,
    number: true,
    when: (device) => RESIDUAL.has(device.kind),
  },
  { name: "standard", label: "Standard", size: 12, options: STANDARDS },
  { name: "rated_voltage_v", label: "Voltage, V", size: 5, number: true },
  { name: "maker", label: "Maker", size: 11 },
  { name: "series", label: "Series", size: 8 },
];
