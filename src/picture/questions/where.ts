import { type Day, dayInWords } from '../../days.ts';
import type { GroupReading } from '../../verdict/questions/where/types.ts';
import { capitalised, count, counted, listed, percent } from '../../verdict/words/format.ts';
import { EMBER, EMBER_TINT, INK, LEVEL, PAPER, QUIET, TEXT_SIZE, TITLE_SIZE, WATER_PALE } from '../palette.ts';
import { type Ink, ink, placed } from '../panel/ink.ts';
import { panel } from '../panel/panel.ts';
import { type PlateNote, plate, smallMultiples } from '../panel/plate.ts';
import { band, dots, ground, level, line } from '../panel/shapes.ts';
import { niceTicks, wordedTicks } from '../panel/ticks.ts';
import type { Box, MarkStyle, Scene } from '../scene.ts';
import { drawable, textWidth } from '../textWidth.ts';

/** What the picture says besides the groups. */
export interface WhereAbout {
  readonly column: string;
  readonly tenure: string;
  readonly subject: string;
  readonly asOf: Day;
}

const ROW = 25;
const PLOT = 104;

/** Groups with at least two points get a panel; of the others there is nothing to see. */
const isDrawn = (one: GroupReading): boolean => one.chart !== null && one.subgroups.length >= 2;
const hasMoved = ({ finding }: GroupReading): boolean => finding === 'risen' || finding === 'fallen';

/** Small multiples: a panel for every group, all on the same scales, clearest evidence first. */
export function whereScene(readings: readonly GroupReading[], about: WhereAbout): Scene {
  const drawn = readings.filter(isDrawn);
  const moved = readings.filter(hasMoved);
  const scales = scalesOf(drawn);
  const cells = drawn.map(
    (one, i) => (box: Pick<Box, 'left' | 'right' | 'top'>) => cell(one, box, scales, i + 2 >= drawn.length),
  );
  return plate(
    {
      title: titleOf(readings),
      moved: moved.length > 0,
      counted: [
        `Lost within ${about.tenure} of starting, by “${about.column}”`,
        about.subject,
        `data through ${dayInWords(about.asOf)}`,
        ...(drawn.length > 0 ? ['a point is placed by the day its accounts started'] : []),
      ],
      keys:
        drawn.length === 0
          ? []
          : [
              { words: 'what chance alone allows', sign: { area: WATER_PALE } },
              { words: 'usual level', sign: { line: LEVEL, width: 3 } },
              ...(moved.length > 0 ? [{ words: 'since it moved', sign: { mark: SINCE } }] : []),
            ],
    },
    drawn.length === 0 ? [] : [smallMultiples(cells)],
    notesOf(
      readings.filter((one) => !isDrawn(one)),
      drawn.length === 0,
    ),
  );
}

function titleOf(readings: readonly GroupReading[]): string {
  const moved = readings.filter(hasMoved);
  const judged = readings.filter(({ chance }) => chance !== null).length;
  if (judged === 0) return 'Too early to say where';
  if (moved.length === 0)
    return judged === 1
      ? 'The one group judged has not moved'
      : `None of ${judged < readings.length ? 'the ' : ''}${count(judged)} groups${judged < readings.length ? ' judged' : ''} has moved`;
  if (moved.length === 1)
    return `${capitalisedRest(moved[0]!, shortened(moved[0]!.name, 420, 700, TITLE_SIZE))} has ${moved[0]!.direction}`;
  return `${moved.length === judged ? 'All' : count(moved.length)} of ${count(judged)} groups have moved`.replace(
    'All of',
    'All',
  );
}

/** Names are written as the data writes them; the rest has no name of its own. */
const capitalisedRest = (one: GroupReading, name: string): string => (one.pooled ? capitalised(name) : name);

interface Scales {
  readonly x: readonly [Day, Day];
  readonly top: number;
}

/** One scale for all: as high as the highest point, and the limits of most. */
function scalesOf(drawn: readonly GroupReading[]): Scales {
  const starts = drawn.flatMap(({ subgroups }) =>
    subgroups.flatMap(({ firstStart, lastStart }) => [firstStart, lastStart]),
  );
  const points = drawn.flatMap(({ chart }) => chart!.points.map(({ value }) => value));
  const limits = drawn.map(({ chart }) => chart!.points.at(-1)!.upper).sort((a, b) => a - b);
  const usual = limits[Math.floor((limits.length - 1) * 0.75)] ?? 0;
  return {
    x: [Math.min(...starts), Math.max(...starts)],
    top: Math.min(1, 1.05 * Math.max(0.01, usual, ...points)),
  };
}

const BEFORE: MarkStyle = { shape: 'circle', area: 30, fill: INK, stroke: INK, strokeWidth: 0 };
const SINCE: MarkStyle = { shape: 'diamond', area: 80, fill: EMBER, stroke: PAPER, strokeWidth: 0.8 };
/** More points than this stand closer than their marks are wide. */
const MANY = 45;

function cell(
  one: GroupReading,
  box: Pick<Box, 'left' | 'right' | 'top'>,
  scales: Scales,
  lowest: boolean,
): { ink: Ink; bottom: number } {
  const { left, right, top } = box;
  const width = right - left;
  const moved = hasMoved(one);
  const head: Ink = {
    texts: [
      placed(shortened(one.name, width, 700), left, top + 19, { color: INK, weight: 700, role: 'group' }),
      placed(verdictOf(one), left, top + 19 + ROW, {
        color: moved ? EMBER : QUIET,
        weight: moved ? 700 : 400,
        role: 'group verdict',
      }),
    ],
  };
  const plot = panel({
    left,
    right,
    top: top + 2 * ROW + 2,
    height: PLOT,
    x: { domain: scales.x, figures: 'date', ...(lowest ? {} : { ticks: [] }) },
    y: {
      domain: [0, scales.top],
      figures: 'percent',
      ticks: wordedTicks(niceTicks(0, scales.top, 2, 'percent'), 'percent'),
    },
  });
  const middle = ({ firstStart, lastStart }: GroupReading['subgroups'][number]): number => (firstStart + lastStart) / 2;
  const { points, center } = one.chart!;
  const from = moved ? (one.since?.point ?? points.length + 1) : points.length + 1;
  const many = points.length > MANY;
  const shrunk = (look: MarkStyle): MarkStyle => (many ? { ...look, area: look.area / 2.2 } : look);
  const places = points.map((point, i) => ({
    x: middle(one.subgroups[i]!),
    y: point.value,
    look: shrunk(point.index >= from ? SINCE : BEFORE),
  }));
  const judged = one.finding !== 'too-few' && one.finding !== 'no-level';
  const edge = one.subgroups.map((subgroup, i) => ({
    x: i === 0 ? subgroup.firstStart : middle(subgroup),
    low: Math.min(scales.top, points[i]!.lower),
    high: Math.min(scales.top, points[i]!.upper),
  }));
  const last = one.subgroups.at(-1)!.lastStart;
  // Of a group that moved the level before the move is shown, which the centre line of all its points would not be.
  const usual = moved ? one.before!.rate : center;
  if (judged) edge.push({ ...edge.at(-1)!, x: last });
  return {
    ink: ink(
      head,
      ...(judged ? [band(plot, edge)] : []),
      ...(moved && one.since ? [{ veils: ground(plot, one.since.start, last, EMBER_TINT).slabs ?? [] }] : []),
      plot.axes,
      ...(judged ? [level(plot, usual, { width: 2.4, from: edge[0]!.x, to: moved ? one.since!.start : last })] : []),
      line(plot, places, { color: QUIET, width: many ? 0.8 : 1.2 }),
      ...(moved && one.since
        ? [level(plot, one.after!.rate, { color: EMBER, width: 3, from: one.since.start, to: last })]
        : []),
      dots(plot, places),
    ),
    bottom: plot.bottom,
  };
}

/** The verdict in the words of a panel: short enough for its width. */
function verdictOf(one: GroupReading): string {
  switch (one.finding) {
    case 'risen':
    case 'fallen':
      return `${one.finding}, ${percent(one.before!.rate)} to ${percent(one.after!.rate)}`;
    case 'alone':
      return 'stands out only on its own';
    case 'steady':
      return `steady at ${percent(one.chart!.center)}`;
    case 'unsteady':
      return 'no steady usual level';
    case 'no-level':
      return one.lost === 0 ? 'nobody lost' : 'no usual level';
    case 'too-few':
      return `too few: ${counted(one.matured, 'account')}`;
  }
}

/** The text, cut to a width with an ellipsis. */
function shortened(text: string, width: number, weight: 400 | 700, size = TEXT_SIZE): string {
  const whole = drawable(text);
  if (textWidth(whole, size, weight) <= width) return whole;
  let end = whole.length;
  while (end > 1 && textWidth(`${whole.slice(0, end).trimEnd()}…`, size, weight) > width) end--;
  return `${whole.slice(0, end).trimEnd()}…`;
}

const NAMED = 5;

function notesOf(undrawn: readonly GroupReading[], nothing: boolean): PlateNote[] {
  if (undrawn.length === 0) return [];
  const names = undrawn.slice(0, NAMED).map(({ name, matured }) => `${shortened(name, 240, 400)} (${count(matured)})`);
  const rest = undrawn.length > NAMED ? [counted(undrawn.length - NAMED, 'more group')] : [];
  return [
    {
      words: `${nothing ? 'too few accounts' : 'not drawn, too few accounts'}: ${listed([...names, ...rest])}`,
      sign: 'heed',
    },
  ];
}

/** What the picture shows, for those who cannot see it. */
export function whereAltText(
  readings: readonly GroupReading[],
  { column, tenure }: Pick<WhereAbout, 'column' | 'tenure'>,
): string {
  const drawn = readings.filter(isDrawn);
  const each = drawn.map((one) => `${one.name}, ${verdictOf(one)}`);
  const few = readings.length - drawn.length;
  return `${titleOf(readings)}. ${
    drawn.length === 0
      ? ''
      : `${counted(drawn.length, 'small chart')} on the same scale, one for each group of “${column}”, of the share lost within ${tenure} of starting: ${each.join('; ')}. `
  }${few > 0 ? `${counted(few, 'group')} with too few accounts to draw.` : ''}`.trim();
}
