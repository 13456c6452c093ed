import type { PictureInput } from '../verdict/types.ts';
import { vagueStart } from '../verdict/words/vagueStart.ts';
import { viewWords } from '../verdict/words/viewWords.ts';
import { heldPoint } from './figures.ts';
import { EMBER, INK, MARGIN, QUIET, TEXT_SIZE, WIDTH } from './palette.ts';
import { reach } from './plotFrame.ts';
import { type Frame, type PlacedText, type Stroke, xAt } from './scene.ts';
import { moreFlags, type Stretch } from './stretches.ts';
import { drawable, textWidth } from './textWidth.ts';
import { balanceText } from './wrapText.ts';

const ROW = 24;
const BRACKET = 16;

interface Label {
  readonly rows: readonly { readonly text: string; readonly bold: boolean }[];
  /** where the middle of the stretch lies; every row sits over it as nearly as the edges allow */
  readonly middle: number;
  readonly left: number;
  readonly width: number;
  readonly color: string;
}

export interface FlagLane {
  /** height of the lane above the plot, brackets included */
  readonly height: number;
  readonly labels: readonly Label[];
  /** stretches whose words found no room here; they belong in the notes */
  readonly unlabelled: readonly Stretch[];
}

/** "began about 12 March 2025"; by point number when there are no dates. */
export function beganWords(input: PictureInput): string {
  const since = input.verdict.since;
  if (!since) return '';
  const began = input.chart?.scale === 'days' ? '' : viewWords(input.view).began;
  return since.start === null
    ? `began about point ${since.point}`
    : vagueStart(since, input.dates)
      ? 'began some time in the tinted stretch'
      : `began about ${heldPoint(input, since.start)}${began === '' ? '' : ` – ${began}`}`;
}

/** The words over a marked stretch: the state in bold, then the flag in words. */
function stretchWords(stretch: Stretch, input: PictureInput): { lead: string; rest: string } {
  const rest = drawable(`${stretch.words}${moreFlags(stretch)}`);
  if (stretch.state === 'standing') return { lead: beganWords(input) || 'flagged', rest };
  return {
    lead: stretch.state === 'watching' ? 'one to watch' : (input.flagsExplained ?? 'flagged, but did not last'),
    rest,
  };
}

/** Plans the words above the plot: the main stretch first, a second one when it fits beside it, the others left to the notes. */
export function planFlagLane(
  all: readonly Stretch[],
  input: PictureInput,
  x: Pick<Frame, 'left' | 'right' | 'xDomain'>,
): FlagLane {
  const labels: Label[] = [];
  const unlabelled: Stretch[] = [];
  if (input.split) labels.push(splitLabel(input.split.after, x));
  for (const stretch of all) {
    const label = labels.length < 2 ? fitLabel(stretch, input, x, labels[0]) : null;
    if (label) labels.push(label);
    else unlabelled.push(stretch);
  }
  const rows = Math.max(0, ...labels.map((label) => label.rows.length));
  return {
    height: rows === 0 && all.length === 0 ? 8 : rows * ROW + BRACKET + 8,
    labels,
    unlabelled,
  };
}

/** The words over the place where the points fall apart into two levels, in one row. */
function splitLabel(after: number, x: Pick<Frame, 'left' | 'right' | 'xDomain'>): Label {
  const text = 'not one level: changes about here';
  const middle = xAt(x, after + 0.5);
  const width = textWidth(text, TEXT_SIZE, 700);
  const left = Math.min(Math.max(middle - width / 2, MARGIN), WIDTH - MARGIN - width);
  return { rows: [{ text, bold: true }], middle, left, width, color: QUIET };
}

function fitLabel(
  stretch: Stretch,
  input: PictureInput,
  x: Pick<Frame, 'left' | 'right' | 'xDomain'>,
  taken: Label | undefined,
): Label | null {
  const { lead, rest } = stretchWords(stretch, input);
  const middle = (xAt(x, stretch.from) + xAt(x, stretch.to)) / 2;
  for (const room of taken ? [300, 240, 190] : [WIDTH - 2 * MARGIN]) {
    const rows = [
      ...balanceText(lead, room, TEXT_SIZE, 700).map((text) => ({
        text,
        bold: true,
      })),
      ...balanceText(rest, Math.min(room, 500), TEXT_SIZE, 400).map((text) => ({
        text,
        bold: false,
      })),
    ];
    const width = Math.max(...rows.map((row) => textWidth(row.text, TEXT_SIZE, row.bold ? 700 : 400)));
    const left = Math.min(Math.max(middle - width / 2, MARGIN), WIDTH - MARGIN - width);
    const clear = !taken || left + width + 22 < taken.left || left > taken.left + taken.width + 22;
    if (clear && rows.length <= 4) return { rows, middle, left, width, color: stretchColor(stretch) };
  }
  return null;
}

function centred(label: Label, row: Label['rows'][number]): number {
  const half = textWidth(row.text, TEXT_SIZE, row.bold ? 700 : 400) / 2;
  return Math.min(Math.max(label.middle, label.left + half), label.left + label.width - half);
}

export function stretchColor(stretch: Stretch): string {
  return stretch.state === 'passed' ? QUIET : EMBER;
}

/** Brackets over every marked stretch and the planned words over the main ones. */
export function placeFlagLane(
  lane: FlagLane,
  all: readonly Stretch[],
  frame: Frame,
): { texts: PlacedText[]; strokes: Stroke[] } {
  const strokes: Stroke[] = [];
  for (const stretch of all) {
    const over = reach(frame);
    const x = xAt(frame, stretch.from) - over;
    const x2 = xAt(frame, stretch.to) + over;
    const y = frame.top - BRACKET + 4;
    const color = stretchColor(stretch);
    const dash = stretch.state === 'standing' || x2 - x < 40 ? {} : { dash: [5, 4] as const };
    const width = stretch.state === 'passed' ? 2 : 3;
    strokes.push({ x, y, x2, y2: y, color, width, ...dash });
    for (const end of [x, x2])
      strokes.push({
        x: end,
        y: y - width / 2,
        x2: end,
        y2: frame.top - 2,
        color,
        width,
      });
  }
  const texts = lane.labels.flatMap((label) =>
    label.rows.map(
      (row, i): PlacedText => ({
        text: row.text,
        x: centred(label, row),
        y: frame.top - BRACKET - 6 - (label.rows.length - 1 - i) * ROW,
        size: TEXT_SIZE,
        weight: row.bold ? 700 : 400,
        color: row.bold ? label.color : INK,
        align: 'center',
        role: 'flag',
      }),
    ),
  );
  return { texts, strokes };
}
