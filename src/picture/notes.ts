import type { Day } from '../days.ts';
import type { PictureInput } from '../verdict/types.ts';
import { viewWords } from '../verdict/words/viewWords.ts';
import { exactLimitsNote } from './exactLimits.ts';
import { count, countOf, heldDate, heldPoint, shortPoint } from './figures.ts';
import { flaggedPoints } from './flaggedPoints.ts';
import { EMBER, INK, LINE, MARGIN, QUIET, TEXT_SIZE, WIDTH } from './palette.ts';
import { EXCLUDED_MARK, GHOST_MARK, OPEN_MARK, PASSED_MARK, WATCHING_MARK } from './pointMarks.ts';
import type { MarkStyle, PlacedMark, PlacedText, Stroke } from './scene.ts';
import type { Stretch } from './stretches.ts';
import { drawable } from './textWidth.ts';
import { valueScale } from './valueScale.ts';
import { wrapText } from './wrapText.ts';

interface Note {
  readonly text: string;
  readonly color: string;
  readonly mark?: MarkStyle | 'bar' | 'heed';
}

const INDENT = 30;
const MOST_STRETCHES = 2;
const MOST_CAUTIONS = 2;
const GENERAL = /taken to be complete through|finance and legal/i;

/** "next point: 37 of 85 accounts so far, due about 3 July 2025" */
export function waitingWords(input: PictureInput): string {
  const waiting = input.waiting;
  if (!waiting) return '';
  if (input.view === 'calendar')
    return waiting.on === null ? '' : `${heldPoint(input, waiting.on)} is not over in the data and left out`;
  const due =
    waiting.on === null
      ? input.view === 'renewal'
        ? 'due when enough renewals have come up'
        : 'due when enough accounts have started'
      : `due about ${heldDate(waiting.on)}`;
  return `next point: ${count(waiting.accounts)} of ${countOf(waiting.of, viewWords(input.view).one)} so far, ${due}`;
}

export function immatureWords(input: PictureInput): string {
  if (input.immature <= 0) return '';
  if (input.view === 'renewal')
    return `${countOf(input.immature, 'renewal')} ${input.immature === 1 ? 'is' : 'are'} still to come`;
  return `${countOf(input.immature, 'account')} ${input.immature === 1 ? 'is' : 'are'} too young to be counted`;
}

/** "the start could lie anywhere from 3 Feb 2025 to 20 Apr 2025": from the first start at the first possible point to the last at the last. */
export function candidateWords(input: PictureInput): string {
  const since = input.verdict.since;
  if (!since) return '';
  const [from, to] = since.candidates;
  const first = whereWords(input, input.dates[from - 1]?.firstStart, from);
  const last = whereWords(input, input.dates[to - 1]?.lastStart, to);
  return first === last
    ? `the start can only lie at ${first}`
    : `the start could lie anywhere from ${first} to ${last}`;
}

function whereWords(input: PictureInput, day: Day | null | undefined, point: number): string {
  return day === null || day === undefined ? `point\u00a0${point}` : shortPoint(input, day);
}

function planNotes(input: PictureInput, unlabelled: readonly Stretch[], floor: string): Note[] {
  const notes: Note[] = [];
  const candidates = candidateWords(input);
  if (input.chart && candidates) notes.push({ text: candidates, color: EMBER, mark: 'bar' });
  for (const stretch of unlabelled.slice(0, MOST_STRETCHES)) {
    const when = input.dates[stretch.said[0] - 1]?.firstStart ?? null;
    const where = when === null ? `point\u00a0${stretch.said[0]}` : shortPoint(input, when);
    const state =
      stretch.state === 'passed'
        ? (input.flagsExplained ?? 'did not last')
        : stretch.state === 'watching'
          ? 'one to watch'
          : 'flagged';
    const mark = stretch.state === 'passed' ? PASSED_MARK : WATCHING_MARK;
    notes.push({
      text: `${state}: ${stretch.words} (from\u00a0${where})`,
      color: QUIET,
      mark,
    });
  }
  const more = unlabelled.length - MOST_STRETCHES;
  if (more > 0)
    notes.push({
      text: `and ${countOf(more, 'more marked stretch', 'more marked stretches')}`,
      color: QUIET,
    });
  const exact = input.chart ? exactLimitsNote(input.chart) : '';
  if (exact !== '') notes.push({ text: exact, color: QUIET });
  const excluded = input.chart?.baseline.excluded.length ?? 0;
  if (excluded > 0)
    notes.push({
      text: `${countOf(excluded, 'point')} left out of the usual level by decision`,
      color: QUIET,
      mark: EXCLUDED_MARK,
    });
  if (input.chart && input.waiting) notes.push({ text: waitingWords(input), color: INK, mark: GHOST_MARK });
  if (input.chart && input.immature > 0) notes.push({ text: immatureWords(input), color: INK });
  if (floor)
    notes.push({
      text: `the scale starts at ${floor}, not at zero`,
      color: QUIET,
    });
  const open = input.chart?.points.find((point) => point.open);
  if (open)
    notes.push({
      text: `the last point is unfinished: ${valueScale(input.chart).words(open.value)} so far since the last loss`,
      color: INK,
      ...(flaggedPoints(input).has(open.index) ? {} : { mark: OPEN_MARK }),
    });
  if (valueScale(input.chart).of === 'gaps')
    notes.push({
      text: 'higher is better: a longer gap is fewer losses. The scale is drawn out at the bottom, where most gaps lie',
      color: QUIET,
    });
  const cuts = input.signals.filter((signal) => signal.speaks === 'cut' && signal.state !== 'passed');
  const cut = cuts.at(-1);
  if (cut)
    notes.push({
      text: `about how the data was cut, not about churn: ${cut.words}`,
      color: QUIET,
      mark: 'heed',
    });
  notes.push(...cautionNotes(input));
  return notes;
}

function cautionNotes(input: PictureInput): Note[] {
  // What holds of every answer gives way to what holds of this one.
  // What the flags about the cut say has a line of its own above.
  const all = input.verdict.cautions.filter((text) => !text.startsWith('About how the data is cut'));
  const cautions = [...all.filter((text) => !GENERAL.test(text)), ...all.filter((text) => GENERAL.test(text))];
  const baseline = input.chart?.baseline;
  if (baseline?.provisional && !cautions.some((caution) => /provisional/i.test(caution))) {
    const used = baseline.last - baseline.first + 1 - baseline.excluded.length;
    cautions.unshift(`provisional usual level: only ${countOf(used, 'point')}`);
  }
  const notes: Note[] = cautions.slice(0, MOST_CAUTIONS).map((text) => ({ text, color: QUIET, mark: 'heed' as const }));
  const more = cautions.length - MOST_CAUTIONS;
  if (more > 0)
    notes.push({
      text: `${countOf(more, 'more caution')} in the message`,
      color: QUIET,
    });
  return notes;
}

/** What stands below the plot, a line or two each, with the mark it explains at its left. */
export function notes(
  input: PictureInput,
  unlabelled: readonly Stretch[],
  top: number,
  floor: string,
): {
  texts: PlacedText[];
  marks: PlacedMark[];
  strokes: Stroke[];
  bottom: number;
} {
  const texts: PlacedText[] = [];
  const marks: PlacedMark[] = [];
  const strokes: Stroke[] = [];
  let y = top;
  for (const note of planNotes(input, unlabelled, floor)) {
    const middle = y + 15;
    if (note.mark === 'bar')
      strokes.push({
        x: MARGIN,
        y: middle,
        x2: MARGIN + 20,
        y2: middle,
        color: EMBER,
        width: 8,
      });
    else if (note.mark === 'heed') {
      strokes.push({
        x: MARGIN + 10,
        y: middle - 8,
        x2: MARGIN + 10,
        y2: middle + 2,
        color: QUIET,
        width: 3.5,
      });
      marks.push({
        x: MARGIN + 10,
        y: middle + 7,
        shape: 'circle',
        area: 14,
        fill: QUIET,
        stroke: QUIET,
        strokeWidth: 0,
      });
    } else if (note.mark) marks.push({ ...note.mark, x: MARGIN + 10, y: middle });
    for (const text of wrapText(drawable(note.text), WIDTH - 2 * MARGIN - INDENT, TEXT_SIZE, 400)) {
      texts.push({
        text,
        x: MARGIN + INDENT,
        y: y + 21,
        size: TEXT_SIZE,
        weight: 400,
        color: note.color,
        align: 'left',
        role: 'note',
      });
      y += TEXT_SIZE * LINE;
    }
    y += 5;
  }
  return { texts, marks, strokes, bottom: y };
}
