import { boxOf, overlap, type Scene } from '../../src/picture/scene.ts';

/** Pairs of texts that touch, texts that leave the drawing, and places that are no numbers, in words. */
export function faults(scene: Scene): string[] {
  const placed = scene.texts.map((text) => ({ text, box: boxOf(text) }));
  const found: string[] = [];
  for (const [i, one] of placed.entries()) {
    const { left, right, top, bottom } = one.box;
    if (![left, right, top, bottom].every(Number.isFinite)) found.push(`nowhere: ${one.text.text}`);
    if (left < 0 || top < 0 || right > scene.widthPx || bottom > scene.heightPx) found.push(`cut: ${one.text.text}`);
    if (one.text.size < 20) found.push(`too small to read on a phone: ${one.text.text}`);
    for (const other of placed.slice(i + 1))
      if (overlap(one.box, other.box)) found.push(`touch: "${one.text.text}" and "${other.text.text}"`);
  }
  const { areas = [], polylines = [] } = scene;
  const places = [
    ...[...scene.slabs, ...scene.veils, ...scene.under, ...scene.over].flatMap(({ x, y, x2, y2 }) => [x, y, x2, y2]),
    ...scene.marks.flatMap(({ x, y }) => [x, y]),
    ...areas.flatMap(({ edge }) => edge.flatMap(({ x, y, y2 }) => [x, y, y2])),
    ...polylines.flatMap(({ path }) => path.flatMap(({ x, y }) => [x, y])),
  ];
  if (!places.every(Number.isFinite)) found.push('something is drawn at a place that is no number');
  return found;
}
