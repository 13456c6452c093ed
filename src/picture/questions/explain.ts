import type { BlockAt } from '../../charts/standing/blockProfile.ts';
import type { Chart } from '../../charts/types.ts';
import type { LastBlockReading } from '../../verdict/judgement.ts';
import type { PointDates, Signal, Verdict } from '../../verdict/types.ts';
import { countOf, heldDate, limitPercent, percent } from '../figures.ts';
import { flaggedPoints } from '../flaggedPoints.ts';
import { EMBER, EMBER_TINT, INK, LEVEL, QUIET, WATER_DEEP, WATER_EDGE, WATER_PALE } from '../palette.ts';
import { ink } from '../panel/ink.ts';
import { callouts, type EndWords, endLabels, endLabelsRoom } from '../panel/labels.ts';
import { type Panel, type PanelOptions, panel } from '../panel/panel.ts';
import { type Part, plate, words } from '../panel/plate.ts';
import { pointDates } from '../panel/pointDates.ts';
import { band, bars, level, line, RING, upright } from '../panel/shapes.ts';
import type { Figures } from '../panel/ticks.ts';
import { pointMarks } from '../pointMarks.ts';
import type { Scene } from '../scene.ts';

export interface ExplainPictureInput {
  readonly chart: Chart;
  readonly dates: readonly PointDates[];
  readonly signals: readonly Signal[];
  readonly verdict: Verdict;
  /** every possible last block, and the one that decides; null where the verdict rests on something else */
  readonly blocks: { readonly profile: readonly BlockAt[]; readonly reading: LastBlockReading } | null;
  /** what is plotted: "lost within 3 months of starting" */
  readonly measure: string;
  readonly subject: string;
  readonly asOf: number;
}

const TITLES: Record<Verdict['outcome'], string> = {
  risen: 'Why this reads as risen',
  fallen: 'Why this reads as fallen',
  steady: 'Why this reads as steady',
  'too-early': 'Why it is too early to tell',
  'cannot-say': 'Why nothing can be said',
};

/** The chart with what decides marked, and below it how much each possible last block speaks against the usual level. */
export function explainScene(input: ExplainPictureInput): Scene {
  const { chart, verdict, measure, subject, asOf, blocks } = input;
  const moved = verdict.outcome === 'risen' || verdict.outcome === 'fallen';
  return plate(
    {
      title: TITLES[verdict.outcome],
      moved,
      lead: verdict.headline,
      counted: [
        measure.replace(/^./, (letter) => letter.toUpperCase()),
        subject,
        countOf(chart.points.length, 'point'),
        `data to ${heldDate(asOf)}`,
      ],
    },
    [(top) => chartAndBlocks(input, top)],
    [
      { words: 'where chance alone keeps the points; the line in it is the usual level', sign: { area: WATER_PALE } },
      { words: 'hollow points: the usual level was set from them', sign: { mark: RING } },
      ...(blocks
        ? [
            {
              words:
                'bars: how much better a level of their own fits the points from there to the newest than the usual level does (log likelihood ratio)',
              sign: { area: moved ? EMBER : WATER_EDGE },
            },
            blockNote(blocks.reading, moved),
          ]
        : []),
      ...(moved && verdict.since
        ? [
            {
              words: `tinted: ${pointRange(verdict.since.candidates)}, where the move can have begun`,
              sign: { area: EMBER_TINT },
            },
          ]
        : []),
    ],
  );
}

function pointRange([from, to]: readonly [number, number]): string {
  return from === to ? `point ${from}` : `points ${from} to ${to}`;
}

function blockNote({ score, threshold, first }: LastBlockReading, moved: boolean): { words: string; color: string } {
  const words =
    score === 0
      ? `no flag lies in the block from point ${first} on, so it does not count`
      : `${score.toFixed(1)} from point ${first} on ${score > threshold ? 'exceeds' : 'does not exceed'} the ${threshold.toFixed(1)} that is needed`;
  return { words, color: moved ? EMBER : INK };
}

const SCALES: Record<NonNullable<Chart['scale']>, Figures> = {
  rate: 'percent',
  accounts: 'count',
  days: 'count',
  score: 'number',
};

function chartAndBlocks(input: ExplainPictureInput, top: number): ReturnType<Part> {
  const { chart, blocks } = input;
  const count = chart.points.length;
  const x = { domain: [0.4, Math.max(count, 6) + 0.6] as const, ticks: [] };
  const ends = endsOf(chart);
  const rightRoom = Math.max(endLabelsRoom(ends), blocks ? endLabelsRoom([neededWords(blocks.reading)]) : 0);
  const values = chart.points.flatMap(({ value, lower, upper }) => [value, lower, upper]).filter(Number.isFinite);
  const low = Math.min(0, ...values);
  const upperPanel: PanelOptions = {
    top,
    height: 220,
    rightRoom,
    x,
    y: { domain: [low, Math.max(...values, low + 1e-3) * 1.04], figures: SCALES[chart.scale ?? 'rate'] },
  };
  if (!blocks) {
    const plot = panel(upperPanel);
    const dated = pointDates(plot, input.dates);
    return { ink: ink(pointsInk(input, plot), dated.ink, endLabels(plot, ends)), bottom: dated.bottom };
  }
  const highest = Math.max(
    ...blocks.profile.map(({ ratio }) => ratio / blocks.reading.dividedBy),
    blocks.reading.threshold,
  );
  const lowerPanel: PanelOptions = {
    top: 0,
    height: 170,
    rightRoom,
    x,
    y: { domain: [0, highest * 1.12], figures: 'number' },
  };
  // Both plots begin at the same px, so that a bar stands below its point.
  const left = Math.max(panel(upperPanel).frame.left, panel(lowerPanel).frame.left);
  const above = aligned(upperPanel, left);
  const title = words('how much the points from here to the newest speak against the usual level', { color: INK })(
    above.frame.bottom + 20,
  );
  const below = aligned({ ...lowerPanel, top: title.bottom + 4 }, left);
  const dated = pointDates(below, input.dates);
  return {
    ink: ink(
      pointsInk(input, above),
      endLabels(above, ends),
      title.ink,
      blocksInk(input, below),
      endLabels(below, [neededWords(blocks.reading)]),
      dated.ink,
    ),
    bottom: dated.bottom,
  };
}

/** The panel moved so that its plot, not its figures, begins at `left`. */
function aligned(options: PanelOptions, left: number): Panel {
  const first = panel(options);
  return panel({ ...options, left: (options.left ?? 26) + left - first.frame.left });
}

function endsOf(chart: Chart): EndWords[] {
  const last = chart.points.at(-1);
  const of = (value: number): string =>
    (chart.scale ?? 'rate') === 'rate'
      ? percent(value)
      : chart.scale === 'score'
        ? value.toFixed(2)
        : String(Math.round(value));
  const limit = (value: number, beside: number): string =>
    (chart.scale ?? 'rate') === 'rate' ? limitPercent(value, beside) : of(value);
  const lines = chart.scale === 'score' ? ['zero'] : ['usual level', of(chart.center)];
  const center = { y: chart.center, lines, color: LEVEL };
  if (!last || !(last.upper > last.lower)) return [center];
  return [
    center,
    { y: last.upper, lines: ['limit', limit(last.upper, last.lower)] },
    ...(last.lower > 0 || chart.scale === 'score'
      ? [{ y: last.lower, lines: ['limit', limit(last.lower, last.upper)] }]
      : []),
  ];
}

function neededWords({ threshold }: LastBlockReading): EndWords {
  return { y: threshold, lines: ['needed', threshold.toFixed(1)], color: EMBER };
}

function pointsInk({ chart, signals, verdict }: ExplainPictureInput, plot: Panel) {
  const { points, center } = chart;
  const end = points.length + 0.5;
  const flagged = flaggedPoints({ chart, signals, verdict });
  const slot = plot.x(2) - plot.x(1);
  const marks = pointMarks(chart, flagged, slot);
  const limits = points.map(({ index, lower, upper }) => ({ x: index - 0.5, low: lower, high: upper }));
  const { since, outcome } = verdict;
  const moved = since && (outcome === 'risen' || outcome === 'fallen') ? since : null;
  return ink(
    band(plot, limits, { end, color: WATER_PALE, opacity: 0.9, edge: WATER_EDGE }),
    moved ? veil(plot, moved.candidates) : {},
    plot.axes,
    level(plot, center, { from: 0.5, to: end }),
    line(
      plot,
      points.map(({ index, value }) => ({ x: index, y: value })),
      { color: '#7d888d', width: slot < 3 ? 0.8 : 1.4 },
    ),
    moved ? upright(plot, moved.point - 0.5, { width: 2 }) : {},
    { marks: marks.map(({ x, value, ...mark }) => ({ ...mark, x: plot.x(x), y: plot.y(value) })) },
  );
}

function veil(plot: Panel, [from, to]: readonly [number, number]) {
  const { top, bottom } = plot.frame;
  return { veils: [{ x: plot.x(from - 0.5), x2: plot.x(to + 0.5), y: top, y2: bottom, color: EMBER_TINT }] };
}

function blocksInk({ blocks, verdict }: ExplainPictureInput, plot: Panel) {
  const { profile, reading } = blocks!;
  const deciding = verdict.outcome === 'risen' || verdict.outcome === 'fallen';
  const height = ({ ratio }: BlockAt): number => Math.max(0, ratio / reading.dividedBy);
  const drawn = bars(
    plot,
    profile.map((block) => ({
      x: block.first - 0.5,
      x2: block.first + 0.5,
      y: height(block),
      color:
        block.side !== reading.side ? WATER_DEEP : deciding && height(block) > reading.threshold ? EMBER : WATER_EDGE,
    })),
    { gap: 1 },
  );
  const best = profile.find(({ first }) => first === reading.first);
  const { since } = verdict;
  const slabs = (drawn.slabs ?? []).map(({ x, x2, y, y2 }) => ({ left: x, right: x2, top: y, bottom: y2 }));
  const needed = level(plot, reading.threshold, { color: EMBER, width: 2, dash: [7, 5] });
  return ink(
    deciding && since ? { slabs: veil(plot, since.candidates).veils } : {},
    drawn,
    plot.axes,
    needed,
    best
      ? callouts(
          plot,
          [
            {
              x: best.first,
              y: height(best),
              words: `point ${best.first}: ${height(best).toFixed(1)}`,
              bold: true,
              color: deciding ? EMBER : QUIET,
              away: 6,
            },
          ],
          [...slabs, needed],
        )
      : {},
  );
}

/** The picture in words. */
export function explainAltText({ verdict, blocks, chart, subject }: ExplainPictureInput): string {
  const reading = blocks?.reading;
  const decides = reading
    ? ` Below it, how much each stretch up to the newest point speaks against the usual level: at most ${reading.score.toFixed(1)}, from point ${reading.first} on, where ${reading.threshold.toFixed(1)} is needed.`
    : '';
  return `Chart of ${countOf(chart.points.length, 'point')} with what decides the verdict marked, ${subject}. ${verdict.headline}${decides}`;
}
