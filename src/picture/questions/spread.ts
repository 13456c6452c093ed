import type { SpreadReading } from '../../verdict/questions/spread/reading.ts';
import { count, countOf, heldDate, percent } from '../figures.ts';
import { EMBER, INK, LEVEL, WATER_DEEP } from '../palette.ts';
import { ink } from '../panel/ink.ts';
import { callouts } from '../panel/labels.ts';
import { panel } from '../panel/panel.ts';
import { type Part, plate } from '../panel/plate.ts';
import { bars, steps, upright } from '../panel/shapes.ts';
import { type Tick, wordedTicks } from '../panel/ticks.ts';
import type { Scene } from '../scene.ts';

export interface SpreadPictureInput {
  readonly reading: SpreadReading;
  readonly headline: string;
  /** "lost within 3 months of starting" */
  readonly measure: string;
  readonly subject: string;
  /** what a point counts: "account" */
  readonly one: string;
  readonly asOf: number;
}

const TITLES: Record<SpreadReading['outcome'], string> = {
  chance: 'As uneven as chance makes it',
  maybe: 'A little more uneven than chance',
  wider: 'More uneven than chance alone',
  alike: 'More alike than chance',
  'one-point': 'One point has no spread',
  'no-level': 'No spread to look at',
};

/** Bars of the points seen, and as steps what the binomial predicts; null where there is nothing to compare. */
export function spreadScene(input: SpreadPictureInput): Scene | null {
  const { reading, headline, measure, subject, asOf } = input;
  const { histogram, dispersion, sigmaZ, stretch, limits } = reading;
  if (!histogram) return null;
  const range = ({ lower, upper }: { lower: number; upper: number }): string =>
    `${percent(lower)} to ${percent(upper)}`;
  const far = reading.furthest[0];
  return plate(
    {
      title: TITLES[reading.outcome],
      moved: reading.outcome === 'wider',
      lead: headline,
      counted: [
        measure.replace(/^./, (letter) => letter.toUpperCase()),
        subject,
        countOf(stretch.counts.length, 'point'),
        `data to ${heldDate(asOf)}`,
      ],
      keys: [
        { words: 'points seen', sign: { area: WATER_DEEP } },
        { words: `predicted from chance alone at ${percent(reading.rate)}`, sign: { line: LEVEL, width: 4 } },
      ],
    },
    [histogramPart(reading, input.one)],
    [
      ...(dispersion && sigmaZ !== null
        ? [
            {
              words: `they vary ${dispersion.ratio.toFixed(2)} times as much as chance would have them; from one to the next ${sigmaZ.toFixed(2)} times`,
              color: INK,
            },
          ]
        : []),
      ...(limits && reading.outcome === 'wider'
        ? [
            {
              words: `limits by chance alone: ${range(limits.binomial)}; by how much they really vary: ${range(limits.prime)}`,
              color: INK,
            },
          ]
        : []),
      ...(far
        ? [
            {
              words: `furthest out: point ${far.index}, ${count(far.lost)} of ${countOf(far.accounts, input.one)} lost`,
            },
          ]
        : []),
      ...(stretch.reason === 'split'
        ? [{ words: 'these points hold two levels, which looks like spread here', sign: 'heed' as const }]
        : []),
      ...(stretch.reason === 'moved'
        ? [{ words: 'only the points before the figure moved', sign: 'heed' as const }]
        : []),
    ],
  );
}

function histogramPart(reading: SpreadReading, one: string): Part {
  const { of, bins } = reading.histogram!;
  const half = of === 'lost' ? 0.5 : 0;
  const [first, last] = [bins[0]!, bins.at(-1)!];
  const edge = (bin: { from: number; to: number }): [number, number] => [bin.from - half, bin.to + half];
  const highest = Math.max(1, ...bins.flatMap((bin) => [bin.seen, bin.expected]));
  const sizes = reading.stretch.counts;
  return (top) => {
    const plot = panel({
      top,
      height: 300,
      x: {
        domain: [edge(first)[0], edge(last)[1]],
        figures: of === 'lost' ? 'count' : 'number',
        title:
          of === 'lost'
            ? `${one}s lost, of ${count(sizes[0]!.accounts)} in a point`
            : 'distance from the usual level, in standard deviations',
        ...(of === 'lost' && first.to > first.from ? { ticks: binTicks(bins) } : {}),
      },
      y: { domain: [0, highest * 1.08], figures: 'count', title: 'points' },
    });
    const predicted = [
      { x: edge(first)[0], y: 0 },
      ...bins.map((bin) => ({ x: edge(bin)[0], y: bin.expected })),
      { x: edge(last)[1], y: 0 },
    ];
    const level = of === 'lost' ? reading.rate * sizes[0]!.accounts : 0;
    const curve = steps(plot, predicted, edge(last)[1], { color: LEVEL, width: 4 });
    const seen = bars(
      plot,
      bins.map((bin) => ({ x: edge(bin)[0], x2: edge(bin)[1], y: bin.seen })),
      { gap: 4 },
    );
    // Words keep off the bars as well.
    const taken = (seen.slabs ?? []).map(({ x, x2, y, y2 }) => ({ left: x, right: x2, top: y, bottom: y2 }));
    const far = reading.furthest[0];
    const farBin = far && bins.find((bin) => placeOf(far, of) >= bin.from && placeOf(far, of) <= bin.to);
    return {
      ink: ink(
        seen,
        upright(plot, level, { color: LEVEL, width: 2, dash: [5, 5] }),
        plot.axes,
        curve,
        callouts(
          plot,
          [
            ...(far && farBin && Math.abs(far.z) > 2.5
              ? [
                  {
                    x: (edge(farBin)[0] + edge(farBin)[1]) / 2,
                    y: farBin.seen,
                    words: `point ${far.index}`,
                    color: EMBER,
                    bold: true,
                  },
                ]
              : []),
            {
              x: level,
              y: highest * 1.08,
              words: 'usual level',
              color: LEVEL,
              sides: ['below right', 'below left'] as const,
              away: 6,
            },
          ],
          [curve, ...taken],
        ),
      ),
      bottom: plot.bottom,
    };
  };
}

function placeOf({ lost, z }: { lost: number; z: number }, of: 'lost' | 'score'): number {
  return of === 'lost' ? lost : z;
}

/** Bars of several counts are named by the first and the last of them. */
function binTicks(bins: readonly { from: number; to: number }[]): Tick[] {
  return bins.map((bin) => ({
    at: (bin.from + bin.to) / 2,
    lines: [`${wordedTicks([bin.from], 'count')[0]!.lines[0]}–${wordedTicks([bin.to], 'count')[0]!.lines[0]}`],
  }));
}

/** The picture in words. */
export function spreadAltText({ reading, headline, subject }: SpreadPictureInput): string {
  const { stretch, dispersion } = reading;
  const times = dispersion ? ` They vary ${dispersion.ratio.toFixed(2)} times as much as chance alone.` : '';
  return `Histogram of ${countOf(stretch.counts.length, 'point')} beside what chance alone predicts, ${subject}. ${headline}${times}`;
}
