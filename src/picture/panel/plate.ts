import { EMBER, INK, LEAD_SIZE, LINE, MARGIN, QUIET, TEXT_SIZE, TITLE_SIZE, WIDTH } from '../palette.ts';
import { type Box, EMPTY_SCENE, type MarkStyle, type Scene } from '../scene.ts';
import { drawable, textWidth } from '../textWidth.ts';
import { wrapEvenly, wrapText } from '../wrapText.ts';
import { type Ink, ink, placed } from './ink.ts';

/*
 * How to make a picture other than the chart (a plate): a head, panels one below the other, notes. All is in px of the drawing, 720 wide;
 * a panel maps values to px; everything drawn is ink, and inks add up. Numbers come finished: nothing is computed here but places.
 *
 *   const scene = plate(
 *     { title: 'Most leave early', lead: 'Of 1,240 accounts, …', counted: ['accounts still there', subject],
 *       keys: [{ words: 'share still there', sign: { line: LEVEL } }] },
 *     [
 *       (top) => {
 *         const ends = [{ y: 0.27, lines: ['after 2 years', '27 %'], color: LEVEL }];
 *         const plot = panel({ top, height: 300, rightRoom: endLabelsRoom(ends),
 *                              x: { domain: [0, 24], figures: 'count', title: 'months since the start' },
 *                              y: { domain: [0, 1], figures: 'percent', title: 'still there' } });
 *         const curve = steps(plot, kept, 24, { color: LEVEL });
 *         return { bottom: plot.bottom,
 *                  ink: ink(band(plot, limits, { end: 24 }), curve, plot.axes, endLabels(plot, ends),
 *                           callouts(plot, [{ x: 6, y: 0.55, words: 'count here' }], [curve])) };
 *       },
 *     ],
 *     [{ words: 'figures beyond month 20 rest on few accounts', sign: 'heed' }],
 *   );
 *   const picture = await drawPlate(scene, altText);
 *
 * Test it with `faults(scene)` of test/picture/faults.ts, and look at the PNG. More examples: test/picture/panel/plates.ts.
 * Colours mean what they mean on the chart: water where chance alone keeps things, sand for what the usual was set from, ember (only) for
 * what stands out of it; ink and quiet for the rest.
 */

/** How a line, an area or a mark of the picture looks, beside the words that name it. */
export type KeySign =
  | { readonly line: string; readonly width?: number; readonly dash?: readonly [number, number] }
  | { readonly area: string }
  | { readonly mark: MarkStyle };

export interface PlateHead {
  /** the finding in a few words; two lines at most */
  readonly title: string;
  /** ember when something has moved or is missed, ink otherwise */
  readonly moved?: boolean;
  /** the finding in a sentence */
  readonly lead?: string;
  /** what is counted, with a capital, of whom, up to when: joined by dots; names of files stay as they are */
  readonly counted?: readonly string[];
  /** what is drawn how */
  readonly keys?: readonly { readonly words: string; readonly sign: KeySign }[];
}

/** A line below the plots: cautions get 'heed'. */
export interface PlateNote {
  readonly words: string;
  readonly color?: string;
  readonly sign?: KeySign | 'heed';
}

/** A part of the plate: given the px it may begin at, its ink and the px the next part may begin at. */
export type Part = (top: number) => { readonly ink: Ink; readonly bottom: number };

/** A picture from its head, its parts one below the other, and its notes. */
export function plate(head: PlateHead, parts: readonly Part[], notes: readonly PlateNote[] = []): Scene {
  const inks: Ink[] = [];
  let y = MARGIN - 8;
  for (const [i, part] of [headPart(head), ...parts, notesPart(notes)].entries()) {
    const made = part(i === 0 ? y : y + 14);
    inks.push(made.ink);
    y = made.bottom;
  }
  return { ...EMPTY_SCENE, ...ink(...inks), widthPx: WIDTH, heightPx: Math.ceil(y + MARGIN - 6) };
}

/** Parts as one, one below the other. */
export function stack(parts: readonly Part[], gap = 14): Part {
  return (top) => {
    const inks: Ink[] = [];
    let y = top;
    for (const [i, part] of parts.entries()) {
      const made = part(i === 0 ? y : y + gap);
      inks.push(made.ink);
      y = made.bottom;
    }
    return { ink: ink(...inks), bottom: y };
  };
}

/**
 * Small multiples: cells in rows, left to right. Every cell gets the box it may fill, words included, and says where it ends; a row is as
 * high as its highest cell.
 */
export function smallMultiples(
  cells: readonly ((box: Pick<Box, 'left' | 'right' | 'top'>) => { readonly ink: Ink; readonly bottom: number })[],
  { columns = 2, gap = 26 }: { readonly columns?: number; readonly gap?: number } = {},
): Part {
  return (top) => {
    const wide = (WIDTH - 2 * MARGIN - gap * (columns - 1)) / columns;
    const inks: Ink[] = [];
    let y = top;
    for (let row = 0; row * columns < cells.length; row++) {
      const made = cells.slice(row * columns, (row + 1) * columns).map((cell, column) => {
        const left = MARGIN + column * (wide + gap);
        return cell({ left, right: left + wide, top: row === 0 ? y : y + gap - 6 });
      });
      inks.push(...made.map((one) => one.ink));
      y = Math.max(...made.map((one) => one.bottom));
    }
    return { ink: ink(...inks), bottom: y };
  };
}

/** Running text over the whole width or between two edges. */
export function words(
  text: string,
  look: {
    readonly size?: number;
    readonly bold?: boolean;
    readonly color?: string;
    readonly left?: number;
    readonly right?: number;
    readonly role?: string;
  } = {},
): Part {
  const { size = TEXT_SIZE, bold = false, color = INK, left = MARGIN, right = WIDTH - MARGIN, role = 'words' } = look;
  const weight = bold ? 700 : 400;
  return (top) => {
    const lines = text === '' ? [] : wrapEvenly(drawable(text), right - left, size, weight);
    return {
      ink: {
        texts: lines.map((one, i) =>
          placed(one.replace(/\u00a0·$/, ''), left, top + (i + 1) * size * LINE - size * 0.2, {
            color,
            weight,
            size,
            role,
          }),
        ),
      },
      bottom: top + lines.length * size * LINE,
    };
  };
}

function headPart(head: PlateHead): Part {
  const parts = [
    words(head.title, { size: TITLE_SIZE, bold: true, color: head.moved ? EMBER : INK, role: 'title' }),
    words(head.lead ?? '', { size: LEAD_SIZE, role: 'headline' }),
    words((head.counted ?? []).filter((part) => part.trim() !== '').join('\u00a0· '), {
      color: QUIET,
      role: 'counted',
    }),
  ];
  return stack([stack(parts, 4), ...(head.keys?.length ? [keysPart(head.keys)] : [])], 8);
}

/** The keys side by side, as many to a line as fit. */
function keysPart(keys: NonNullable<PlateHead['keys']>): Part {
  return (top) => {
    const inks: Ink[] = [];
    let x = MARGIN;
    let y = top + TEXT_SIZE * LINE;
    for (const key of keys) {
      const text = drawable(key.words);
      const width = 40 + textWidth(text, TEXT_SIZE, 400);
      if (x > MARGIN && x + width > WIDTH - MARGIN) {
        x = MARGIN;
        y += TEXT_SIZE * LINE + 2;
      }
      const lines = wrapText(text, WIDTH - MARGIN - x - 40, TEXT_SIZE, 400);
      inks.push(sign(key.sign, x, y - 11, 30));
      for (const [i, one] of lines.entries()) {
        if (i > 0) y += TEXT_SIZE * LINE;
        inks.push({ texts: [placed(one, x + 40, y - 4, { color: INK, role: 'key' })] });
      }
      x += width + 28;
    }
    return { ink: ink(...inks), bottom: y + 2 };
  };
}

const INDENT = 30;

function notesPart(notes: readonly PlateNote[]): Part {
  return (top) => {
    const inks: Ink[] = [];
    let y = top;
    for (const note of notes) {
      const { color = QUIET } = note;
      if (note.sign === 'heed') inks.push(heed(y + 15));
      else if (note.sign) inks.push(sign(note.sign, MARGIN, y + 15, 20));
      for (const text of wrapText(drawable(note.words), WIDTH - 2 * MARGIN - INDENT, TEXT_SIZE, 400)) {
        inks.push({ texts: [placed(text, MARGIN + INDENT, y + 21, { color, role: 'note' })] });
        y += TEXT_SIZE * LINE;
      }
      y += 5;
    }
    return { ink: ink(...inks), bottom: y };
  };
}

function sign(one: KeySign, x: number, middle: number, wide: number): Ink {
  if ('area' in one) return { slabs: [{ x, y: middle - 8, x2: x + wide, y2: middle + 8, color: one.area }] };
  if ('mark' in one) return { marks: [{ ...one.mark, x: x + wide / 2, y: middle }] };
  const { line: color, width = 5, dash } = one;
  return { over: [{ x, y: middle, x2: x + wide, y2: middle, color, width, ...(dash ? { dash } : {}) }] };
}

/** The mark of a caution. */
function heed(middle: number): Ink {
  const x = MARGIN + 10;
  return {
    over: [{ x, y: middle - 8, x2: x, y2: middle + 2, color: QUIET, width: 3.5 }],
    marks: [{ x, y: middle + 7, shape: 'circle', area: 14, fill: QUIET, stroke: QUIET, strokeWidth: 0 }],
  };
}
