// Hand and keys on the sheet: drag moves it, the wheel zooms, a click says "the line passes here", Shift means "not".

const SLACK = 4;
const WHEEL = 0.0018;
const STEP = 1.35;
const ARROWS = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] };

/** Wire a canvas to its pane (what moves the view and the cross) and to what a person says there. */
export function gesturesOn(canvas, pane, acts) {
  const fingers = new Map();
  let press = null;
  let clicked = 0;

  const pixel = (event) => {
    const box = canvas.getBoundingClientRect();
    return [event.clientX - box.left, event.clientY - box.top];
  };

  canvas.addEventListener("pointerdown", (event) => {
    if (event.button > 1) return;
    canvas.setPointerCapture(event.pointerId);
    fingers.set(event.pointerId, pixel(event));
    press = { from: pixel(event), last: pixel(event), moved: false, box: event.shiftKey && event.button === 0 };
  });

  canvas.addEventListener("pointermove", (event) => {
    const at = pixel(event);
    if (fingers.size === 2 && fingers.has(event.pointerId)) return pinch(event.pointerId, at);
    if (!press || !fingers.has(event.pointerId)) return pane.pointed(at, event.shiftKey);
    if (!press.moved && Math.hypot(at[0] - press.from[0], at[1] - press.from[1]) < SLACK) return undefined;
    press.moved = true;
    if (press.box) acts.boxing(press.from, at);
    else pane.panned(at[0] - press.last[0], at[1] - press.last[1]);
    press.last = at;
    return undefined;
  });

  function pinch(id, at) {
    const before = [...fingers.values()];
    fingers.set(id, at);
    const after = [...fingers.values()];
    const apart = ([a, b]) => Math.hypot(a[0] - b[0], a[1] - b[1]);
    const middle = ([a, b]) => [(a[0] + b[0]) / 2, (a[1] + b[1]) / 2];
    const [was, is] = [middle(before), middle(after)];
    pane.panned(is[0] - was[0], is[1] - was[1]);
    pane.zoomed(apart(after) / (apart(before) || 1), is);
    press.moved = true;
  }

  const release = (event) => {
    fingers.delete(event.pointerId);
    const held = press;
    press = null;
    if (!held || event.type === "pointercancel") return acts.boxing(null);
    const at = pixel(event);
    if (held.moved) return held.box ? acts.leaveOut(held.from, at) : undefined;
    if (event.button !== 0) return undefined;
    // The second click of a double-click asks for a value; the first has already been taken as a click on a line.
    if (event.timeStamp - clicked < 350) {
      clicked = 0;
      return acts.say(at);
    }
    clicked = event.timeStamp;
    return event.shiftKey ? acts.not(at) : acts.passes(at);
  };
  canvas.addEventListener("pointerup", release);
  canvas.addEventListener("pointercancel", release);
  canvas.addEventListener("pointerleave", () => press || pane.left());

  canvas.addEventListener(
    "wheel",
    (event) => {
      event.preventDefault();
      const lines = event.deltaMode === 1 ? 16 : 1;
      pane.zoomed(Math.exp(-event.deltaY * lines * WHEEL * (event.ctrlKey ? 4 : 1)), pixel(event));
    },
    { passive: false },
  );

  canvas.addEventListener("keydown", (event) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const arrow = ARROWS[event.key];
    const cross = pane.cross();
    if (arrow) pane.stepped(arrow.map((each) => each * (event.shiftKey ? 20 : 2)));
    else if (event.key === "+" || event.key === "=") pane.zoomed(STEP, cross);
    else if (event.key === "-") pane.zoomed(1 / STEP, cross);
    else if (event.key === "0") pane.whole();
    else if (event.key === "Enter") event.shiftKey ? acts.not(cross) : acts.passes(cross);
    else if (event.key === "v") acts.say(cross);
    else if (event.key === "b") acts.corner(cross);
    else return;
    event.preventDefault();
    event.stopPropagation();
  });
}
