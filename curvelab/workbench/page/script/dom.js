// Elements are made here and nowhere else: text always goes in as text, so nothing a file says becomes markup.

function dress(node, attributes, children) {
  for (const [name, value] of Object.entries(attributes ?? {})) {
    if (value === null || value === undefined || value === false) continue;
    if (name.startsWith("on")) node.addEventListener(name.slice(2), value);
    else if (name === "value") node.value = value;
    else if (name === "checked") node.checked = value;
    else node.setAttribute(name, value === true ? "" : String(value));
  }
  node.append(...children.flat(Infinity).filter((child) => child !== null && child !== undefined && child !== false));
  return node;
}

export function el(name, attributes, ...children) {
  return dress(document.createElement(name), attributes, children);
}

/** Replace what `parent` holds; focus stays where it was if an element with the same data-focus is there again. */
export function fill(parent, ...children) {
  const held = parent.contains(document.activeElement) ? document.activeElement : null;
  const name = held?.closest("[data-focus]")?.dataset.focus;
  const typed = held && "value" in held ? held.value : null;
  parent.replaceChildren(
    ...children.flat(Infinity).filter((child) => child instanceof Node || typeof child === "string"),
  );
  const again = name && parent.querySelector(`[data-focus="${CSS.escape(name)}"]`);
  if (!again) return;
  if (typed !== null && again.tagName === "INPUT" && again.type === "text") again.value = typed;
  again.focus({ preventScroll: true });
}

/** A button with words; `keys` names the key that does the same. */
export function button(text, onclick, attributes = {}) {
  return el("button", { type: "button", onclick, ...attributes }, text);
}

export function field(label, input) {
  return el("label", { class: "field" }, el("span", {}, label), input);
}

/** A call of `act` once nothing has called for `wait` ms. */
export function settled(act, wait) {
  let timer = 0;
  return (...given) => {
    clearTimeout(timer);
    timer = setTimeout(() => act(...given), wait);
  };
}
