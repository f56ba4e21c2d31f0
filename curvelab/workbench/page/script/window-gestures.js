// Hand and keys on exact axes: drag moves the window, the wheel and plus and minus zoom, arrows move the cross.

const WHEEL = 0.0018;
const STEP = 1.35;
const ARROWS = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] };

export function windowGestures(canvas, pane) {
  let last = null;
  const pixel = (event) => {
    const box = canvas.getBoundingClientRect();
    return [event.clientX - box.left, event.clientY - box.top];
  };
  canvas.addEventListener("pointerdown", (event) => {
    if (event.button > 1 || !pane.window) return;
    canvas.setPointerCapture(event.pointerId);
    last = pixel(event);
  });
  canvas.addEventListener("pointermove", (event) => {
    if (!pane.window) return;
    const at = pixel(event);
    if (last) pane.panned(at[0] - last[0], at[1] - last[1]);
    else pane.pointed(at);
    if (last) last = at;
  });
  const release = () => (last = null);
  canvas.addEventListener("pointerup", release);
  canvas.addEventListener("pointercancel", release);
  canvas.addEventListener("pointerleave", () => last || pane.left());
  canvas.addEventListener("dblclick", () => pane.window && pane.whole());
  canvas.addEventListener(
    "wheel",
    (event) => {
      if (!pane.window) return;
      event.preventDefault();
      const lines = event.deltaMode === 1 ? 16 : 1;
      pane.zoomed(Math.exp(-event.deltaY * lines * WHEEL * (event.ctrlKey ? 4 : 1)), pixel(event));
    },
    { passive: false },
  );
  canvas.addEventListener("keydown", (event) => {
    if (!pane.window || event.ctrlKey || event.metaKey || event.altKey) return;
    const arrow = ARROWS[event.key];
    if (arrow) pane.stepped(arrow.map((each) => each * (event.shiftKey ? 20 : 2)));
    else if (event.key === "+" || event.key === "=") pane.zoomed(STEP, pane.cross());
    else if (event.key === "-") pane.zoomed(1 / STEP, pane.cross());
    else if (event.key === "0") pane.whole();
    else return;
    event.preventDefault();
    event.stopPropagation();
  });
}
