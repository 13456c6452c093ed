import type { PictureInput } from '../verdict/types.ts';
import { viewWords } from '../verdict/words/viewWords.ts';
import { count, countOf, heldDate } from './figures.ts';
import { header } from './header.ts';
import { immatureWords, notes } from './notes.ts';
import {
  HAIRLINE,
  INK,
  LEVEL,
  LINE,
  MARGIN,
  QUIET,
  TEXT_SIZE,
  WATER_DEEP,
  WATER_EDGE,
  WATER_PALE,
  WIDTH,
} from './palette.ts';
import type { Frame, PlacedText, Scene, Slab, Stroke } from './scene.ts';
import { drawable } from './textWidth.ts';
import { wrapText } from './wrapText.ts';

/** The drawing while there is nothing to chart yet: how full the first subgroup is, when it is due, what comes next. */
export function collectionScene(input: PictureInput): Scene {
  const head = header(input);
  const texts: PlacedText[] = [...head.texts];
  const slabs: Slab[] = [];
  const under: Stroke[] = [];
  const left = MARGIN;
  const right = WIDTH - MARGIN;
  let y = head.bottom + 26;
  const say = (text: string, size: number, weight: 400 | 700, color: string): void => {
    for (const line of wrapText(drawable(text), right - left, size, weight)) {
      y += size * LINE;
      texts.push({
        text: line,
        x: left,
        y: y - size * 0.25,
        size,
        weight,
        color,
        align: 'left',
        role: 'collection',
      });
    }
  };
  const { waiting } = input;
  if (waiting && waiting.of > 0 && input.view !== 'calendar') {
    const share = Math.min(1, Math.max(0, waiting.accounts / waiting.of));
    const top = y;
    const bottom = y + 92;
    const level = left + share * (right - left);
    slabs.push({ x: left, y: top, x2: right, y2: bottom, color: WATER_PALE });
    if (share > 0) slabs.push({ x: left, y: top, x2: level, y2: bottom, color: WATER_DEEP });
    for (let i = 1; i < 10; i++) {
      const x = left + (i / 10) * (right - left);
      under.push({
        x,
        y: bottom - (i === 5 ? 26 : 15),
        x2: x,
        y2: bottom,
        color: WATER_EDGE,
        width: 2,
      });
    }
    under.push({
      x: level,
      y: top - 8,
      x2: level,
      y2: bottom + 8,
      color: LEVEL,
      width: 4,
    });
    y = bottom + 14;
    say(
      `${count(waiting.accounts)} of ${countOf(waiting.of, viewWords(input.view).one)} for the first point so far`,
      26,
      700,
      INK,
    );
    say(
      waiting.on === null
        ? input.view === 'renewal'
          ? 'Not enough renewals have come up yet to fill it.'
          : 'Not enough accounts have started yet to fill it.'
        : `The first point is due about ${heldDate(waiting.on)}.`,
      TEXT_SIZE + 2,
      400,
      INK,
    );
    y += 8;
  } else {
    under.push({ x: left, y, x2: right, y2: y, color: HAIRLINE, width: 2 });
    y += 6;
    say('There is no point to draw yet.', 26, 700, INK);
  }
  const young = immatureWords(input);
  if (young) say(`${young}.`, TEXT_SIZE + 2, 400, INK);
  y += 6;
  for (const step of input.verdict.next.slice(0, 2)) say(step, TEXT_SIZE, 400, QUIET);
  const below = notes(input, [], y + 8, '');
  const frame: Frame = {
    left,
    right,
    top: y,
    bottom: y + 1,
    xDomain: [0, 1],
    yDomain: [0, 1],
  };
  return {
    widthPx: WIDTH,
    heightPx: Math.ceil(below.bottom + MARGIN - 4),
    frame,
    slabs,
    veils: [],
    under: [...under, ...head.strokes],
    band: [],
    levels: [],
    points: [],
    line: { width: 1, opacity: 1 },
    over: below.strokes,
    marks: below.marks,
    texts: [...texts, ...below.texts],
  };
}
