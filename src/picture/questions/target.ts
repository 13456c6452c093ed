import type { Chart } from '../../charts/types.ts';
import { chancePercent } from '../../verdict/questions/chanceWords.ts';
import type { TargetReading } from '../../verdict/questions/target/reading.ts';
import { targetPercent } from '../../verdict/questions/target/words.ts';
import type { PointDates } from '../../verdict/types.ts';
import { countOf, heldDate, percent, percentRange } from '../figures.ts';
import { GHOST, INK, LEVEL, SAND_INK, WATER_DEEP, WATER_PALE } from '../palette.ts';
import { ink } from '../panel/ink.ts';
import { type EndWords, endLabels, endLabelsRoom } from '../panel/labels.ts';
import { panel } from '../panel/panel.ts';
import { type Part, plate } from '../panel/plate.ts';
import { pointDates } from '../panel/pointDates.ts';
import { band, DOT, dots, ground, level, line, RING, ranges } from '../panel/shapes.ts';
import type { Scene } from '../scene.ts';

export interface TargetPictureInput {
  readonly reading: TargetReading;
  readonly chart: Chart;
  readonly dates: readonly PointDates[];
  readonly headline: string;
  /** "lost within 3 months of starting" */
  readonly measure: string;
  readonly subject: string;
  readonly asOf: number;
}

/** Points shown at most, the newest ones, and points to come. */
const SHOWN = 36;
const AHEAD = 4;

const TITLES: Record<TargetReading['outcome'], string> = {
  met: 'Target met, beyond chance',
  missed: 'Target missed, beyond chance',
  unclear: 'Target neither met nor missed for sure',
  nobody: 'A target of 0\u00a0% allows no loss at all',
  everybody: 'A target of 100\u00a0% cannot be missed',
};

/** The newest points against the target, the level of their stretch, and where the next points will lie. */
export function targetScene(input: TargetPictureInput): Scene {
  const { reading, measure, subject, asOf } = input;
  const { outcome, next, target } = reading;
  const chances = next.map(({ points, chance }, i) => {
    const what = points === 1 ? 'next point' : i === 1 ? `mean of the next\u00a0${points}` : `of\u00a0${points}`;
    return `${what}: ${chancePercent(chance)}`;
  });
  return plate(
    {
      title: TITLES[outcome],
      moved: outcome === 'missed' || (outcome === 'nobody' && reading.stretch.pooled.lost > 0),
      lead: input.headline.replace(/^[^:]*:\s*(.)/u, (_, letter: string) => letter.toUpperCase()),
      counted: [measure.replace(/^./, (letter) => letter.toUpperCase()), subject, `data to ${heldDate(asOf)}`],
      keys: [
        { words: 'where the true level lies (95 of 100)', sign: { area: WATER_DEEP } },
        { words: 'where 9 of 10 next points lie', sign: { line: GHOST, width: 3 } },
      ],
    },
    [chartPart(input)],
    [
      ...(outcome === 'everybody'
        ? []
        : [
            {
              words: `chance to meet ${targetPercent(target)} with nothing changed, ${chances.join('; ')}`,
              color: INK,
            },
          ]),
      { words: 'a single point above or below the target says little: chance moves it', sign: 'heed' as const },
      { words: 'pay follows written definitions, finance and legal people, not this picture', sign: 'heed' as const },
    ],
  );
}

function chartPart({ reading, chart, dates }: TargetPictureInput): Part {
  const { stretch, interval, target, nextRange } = reading;
  const skipped = Math.max(0, chart.points.length - SHOWN);
  const shown = chart.points.slice(skipped);
  const ends: EndWords[] = [
    { y: interval.estimate, lines: ['level', percent(interval.estimate)], color: LEVEL },
    ...(target <= 1 ? [{ y: target, lines: ['target', targetPercent(target)], color: SAND_INK }] : []),
  ];
  const top = Math.max(
    ...shown.map((point) => point.value),
    interval.high,
    nextRange.high,
    Math.min(target, 1) * 1.05,
    0.01,
  );
  return (from) => {
    const slots = Math.max(shown.length + AHEAD, 8);
    const plot = panel({
      top: from,
      height: 310,
      rightRoom: endLabelsRoom(ends),
      x: { domain: [0.4, slots + 0.6], ticks: [] },
      y: { domain: [0, Math.min(1, top * 1.04)], figures: 'percent' },
    });
    const first = Math.max(stretch.from - skipped, 1) - 0.5;
    const end = shown.length + 0.5;
    const dated = pointDates(plot, dates.slice(skipped));
    const inside = (index: number): boolean => index >= stretch.from && index <= stretch.to;
    return {
      ink: ink(
        ground(plot, end, end + AHEAD, '#f3f2ec'),
        ...(target < 1 && target > 0 ? [level(plot, target, { color: SAND_INK, width: 3, dash: [10, 6] })] : []),
        band(
          plot,
          [first, end].map((x) => ({ x, ...interval })),
          { color: WATER_DEEP, opacity: 0.8 },
        ),
        band(
          plot,
          [end, end + AHEAD].map((x) => ({ x, ...nextRange })),
          { color: WATER_PALE, opacity: 0.7 },
        ),
        line(
          plot,
          shown.map(({ value }, i) => ({ x: i + 1, y: value })),
          { color: '#7d888d', width: 1.4 },
        ),
        level(plot, interval.estimate, { from: first, to: end, color: LEVEL, width: 3.5 }),
        level(plot, interval.estimate, { from: end, to: end + AHEAD, color: LEVEL, width: 2, dash: [5, 5] }),
        ranges(
          plot,
          Array.from({ length: AHEAD }, (_, i) => ({ x: shown.length + 1 + i, ...nextRange })),
          { color: GHOST, width: 3, foot: 4 },
        ),
        dots(
          plot,
          shown.map(({ value, index }, i) => ({ x: i + 1, y: value, look: inside(index) ? DOT : RING })),
        ),
        plot.axes,
        dated.ink,
        endLabels(plot, ends),
      ),
      bottom: dated.bottom,
    };
  };
}

/** The picture in words. */
export function targetAltText({ reading, headline, subject }: TargetPictureInput): string {
  const { interval, next, target, stretch } = reading;
  const one = next[0];
  const ahead = one ? ` The next point meets it with ${chancePercent(one.chance)} chance if nothing changes.` : '';
  return `Chart of ${countOf(stretch.counts.length, 'point')} against a target of ${targetPercent(target)}, ${subject}. ${headline} Level ${percent(interval.estimate)}, ${percentRange(interval.low, interval.high)}.${ahead}`;
}
