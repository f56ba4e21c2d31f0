// The paper laid under exact axes: each tile drawn where its corners belong.

const PARTS = 6;

/** Draw the sheet's tiles within the plot onto the frame of the twin. */
export function drawPaperBelow(context, frame, plane, pane, ink) {
  const { tiles } = pane;
  if (!tiles) return;
  const corners = frame.window[0]
    .flatMap((u) => frame.window[1].map((v) => plane.placeOfScaled([u, v])))
    .filter(Boolean);
  if (corners.length < 4) return;
  const box = [0, 1]
    .map((i) => Math.min(...corners.map((each) => each[i])))
    .concat([0, 1].map((i) => Math.max(...corners.map((each) => each[i]))));
  const scale = (frame.wide / (box[2] - box[0])) * (window.devicePixelRatio || 1);
  const level = tiles.levelFor(scale);
  for (const each of new Set([Math.min(tiles.coarsest, level + 2), level])) {
    tiles.visit(box, each, (image, covers) => {
      for (let part = 0; part < PARTS * PARTS; part += 1) {
        drawPart(context, frame, plane, image, covers, part % PARTS, Math.floor(part / PARTS));
      }
    });
  }
  const dim = Number(ink("sheet-dim"));
  if (!dim) return;
  context.fillStyle = `rgba(20, 24, 26, ${dim})`;
  context.fillRect(frame.left, frame.top, frame.wide, frame.high);
}

function drawPart(context, frame, plane, image, [x0, y0, x1, y1], column, row) {
  const at = (i, j) => frame.pixelOfScaled(plane.scaled([x0 + ((x1 - x0) * i) / PARTS, y0 + ((y1 - y0) * j) / PARTS]));
  const [origin, right, down] = [at(column, row), at(column + 1, row), at(column, row + 1)];
  const size = [image.naturalWidth / PARTS, image.naturalHeight / PARTS];
  const along = right.map((each, i) => (each - origin[i]) / size[0]);
  const below = down.map((each, i) => (each - origin[i]) / size[1]);
  context.save();
  context.transform(along[0], along[1], below[0], below[1], origin[0], origin[1]);
  context.drawImage(image, column * size[0], row * size[1], size[0], size[1], 0, 0, size[0] + 0.3, size[1] + 0.3);
  context.restore();
}
