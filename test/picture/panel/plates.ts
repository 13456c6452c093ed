import { EMBER, LEVEL, SAND, WATER_DEEP, WATER_EDGE } from '../../../src/picture/palette.ts';
import { ink } from '../../../src/picture/panel/ink.ts';
import { callouts, endLabels, endLabelsRoom } from '../../../src/picture/panel/labels.ts';
import { panel } from '../../../src/picture/panel/panel.ts';
import { plate, smallMultiples, stack, words } from '../../../src/picture/panel/plate.ts';
import {
  band,
  bars,
  dots,
  ground,
  level,
  line,
  lyingRanges,
  RING,
  ranges,
  STANDOUT,
  steps,
  upright,
} from '../../../src/picture/panel/shapes.ts';
import type { Scene } from '../../../src/picture/scene.ts';

/*
 * Pictures that use every part of the kit, for the tests. Their numbers are made up and show nothing but how things are drawn.
 */

const months = Array.from({ length: 25 }, (_, month) => month);

/** A curve in steps with its band, a marked place with words, labels at the right. */
function curve(): Scene {
  const kept = months.map((x) => ({ x, y: 0.25 + 0.75 * 0.86 ** x }));
  const ends = [
    { y: kept.at(-1)!.y, lines: ['still there', 'after 2 years', '27 %'], color: LEVEL },
    { y: 0.45, lines: ['the usual'], color: EMBER },
  ];
  return plate(
    {
      title: 'Most leave in the first half year',
      lead: 'Of 1,240 accounts, about 55 of 100 are still there after three months and 27 after two years.',
      counted: ['Accounts still there', 'Marrowby Seed Club export', 'data to 30\u00a0June\u00a02026'],
      keys: [
        { words: 'share still there', sign: { line: LEVEL } },
        { words: 'where chance leaves it 95 times in 100', sign: { area: WATER_DEEP } },
      ],
    },
    [
      (top) => {
        const plot = panel({
          top,
          height: 300,
          rightRoom: endLabelsRoom(ends),
          x: { domain: [0, 24], figures: 'count', title: 'months since the start' },
          y: { domain: [0, 1], figures: 'percent', title: 'still there' },
        });
        const labels = endLabels(plot, ends);
        const kept24 = steps(plot, kept, 24, { color: LEVEL, width: 3 });
        return {
          ink: ink(
            ground(plot, 3, 6, SAND),
            band(
              plot,
              kept.map(({ x, y }) => ({ x, low: y - 0.05, high: Math.min(1, y + 0.05) })),
              {
                color: WATER_DEEP,
                end: 24,
                opacity: 0.8,
              },
            ),
            kept24,
            line(
              plot,
              [
                { x: 0, y: 0.45 },
                { x: 24, y: 0.45 },
              ],
              { color: EMBER, dash: [8, 6] },
            ),
            upright(plot, 6, { color: EMBER }),
            dots(plot, [{ x: 6, y: kept[6]!.y }], STANDOUT),
            callouts(plot, [{ x: 6, y: kept[6]!.y, words: 'count here: after six months' }], [kept24]),
            plot.axes,
            labels,
          ),
          bottom: plot.bottom,
        };
      },
    ],
    [
      { words: 'figures beyond month 20 rest on fewer than 30 accounts', sign: 'heed' },
      { words: 'six months is recommended', color: EMBER, sign: { mark: STANDOUT } },
    ],
  );
}

/** Bars with a predicted line, and below them a list of estimates. */
function barsAndRanges(): Scene {
  const seen = [0, 1, 3, 6, 9, 8, 7, 4, 2, 1, 1];
  const rows = ['pooled over all months', 'lost over customers at the start', 'mean of the monthly rates'];
  return plate({ title: 'As uneven as chance makes it', counted: ['57 points of 85 accounts'] }, [
    stack([
      (top) => {
        const plot = panel({
          top,
          height: 220,
          x: { domain: [-0.5, 10.5], figures: 'count', title: 'accounts lost in a point of 85' },
          y: { domain: [0, 10], nice: true, figures: 'count', title: 'points' },
        });
        return {
          ink: ink(
            bars(
              plot,
              seen.map((y, x) => ({ x: x - 0.5, x2: x + 0.5, y })),
            ),
            ranges(plot, [{ x: 9, low: 0.5, high: 3 }]),
            level(plot, 5, { color: WATER_EDGE, dash: [4, 4] }),
            plot.axes,
          ),
          bottom: plot.bottom,
        };
      },
      words('What the common ways of counting give', { bold: true }),
      (top) => {
        const plot = panel({
          top,
          height: rows.length * 62,
          x: { domain: [0.02, 0.16], figures: 'percent' },
          y: { domain: [0, rows.length], ticks: [] },
        });
        const at = (i: number): number => rows.length - i - 0.7;
        return {
          ink: ink(
            lyingRanges(
              plot,
              rows.map((_, i) => ({ y: at(i), low: 0.04 + i * 0.02, high: 0.08 + i * 0.02 })),
            ),
            dots(
              plot,
              rows.map((_, i) => ({ x: 0.055 + i * 0.02, y: at(i) })),
              RING,
            ),
            callouts(
              plot,
              rows.map((text, i) => ({ x: 0.02, y: at(i), words: text, sides: ['above'], most: 400 })),
            ),
            plot.axes,
          ),
          bottom: plot.bottom,
        };
      },
    ]),
  ]);
}

/** Cells side by side, dates below. */
function multiples(): Scene {
  const cells = ['Windowsill', 'Allotment', 'Orchard'].map(
    (name, k) =>
      ({ left, right, top }: { left: number; right: number; top: number }) => {
        const title = words(name, { bold: true, left, right })(top);
        const plot = panel({
          top: title.bottom,
          height: 150,
          left,
          right,
          x: { domain: [19_723, 20_270], figures: 'date' },
          y: { domain: [0, 0.2], figures: 'percent' },
        });
        const places = Array.from({ length: 18 }, (_, i) => ({
          x: 19_723 + i * 30,
          y: 0.06 + 0.03 * Math.sin(i * (k + 1)) + (k === 1 && i > 10 ? 0.05 : 0),
        }));
        return {
          ink: ink(
            title.ink,
            band(
              plot,
              [19_723, 20_270].map((x) => ({ x, low: 0.01, high: 0.13 })),
              { edge: WATER_EDGE },
            ),
            level(plot, 0.06),
            line(plot, places, { width: 1.4 }),
            dots(plot, places),
            plot.axes,
          ),
          bottom: plot.bottom,
        };
      },
  );
  return plate({ title: 'One of three plans has moved', moved: true, lead: 'Allotment loses more than before.' }, [
    smallMultiples(cells),
  ]);
}

export const plates: Readonly<Record<string, Scene>> = {
  curve: curve(),
  'bars-and-ranges': barsAndRanges(),
  multiples: multiples(),
};
