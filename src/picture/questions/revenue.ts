import type { PictureInput } from '../../verdict/types.ts';
import { altText } from '../altText.ts';
import { capitalised, percent } from '../figures.ts';
import { layout } from '../layout.ts';
import { INK, LEVEL, MARGIN, QUIET, SAND_INK, WATER_EDGE, WATER_PALE, WIDTH } from '../palette.ts';
import { type Ink, ink } from '../panel/ink.ts';
import { type EndWords, endLabels, endLabelsRoom } from '../panel/labels.ts';
import { type Panel, type PanelOptions, panel } from '../panel/panel.ts';
import { words } from '../panel/plate.ts';
import { band, DOT, dots, level, line, STANDOUT } from '../panel/shapes.ts';
import type { Scene } from '../scene.ts';

/** What stands below the chart, one value a point; shares are fractions of the revenue at the start, `logo` of the accounts. */
export interface BesideRevenue {
  readonly movingRanges: readonly (number | null)[];
  readonly averageMovingRange: number;
  readonly rangeUpper: number;
  readonly logo: readonly number[];
  /** null when the export holds one amount for each account */
  readonly contraction: readonly number[] | null;
  readonly expansion: readonly number[] | null;
  readonly totals: { readonly logo: number; readonly contraction: number; readonly expansion: number };
}

/** The chart of revenue churn, below it its moving ranges, and what else the same accounts did. */
export function revenueScene(input: PictureInput, beside: BesideRevenue): Scene {
  const chart = layout(input);
  const parts = [rangesPart(chart, beside), besidePart(chart, beside)];
  const inks: Ink[] = [];
  let y = chart.heightPx - MARGIN + 10;
  for (const part of parts) {
    const made = part(y);
    inks.push(made.ink);
    y = made.bottom + 16;
  }
  const below = ink(...inks);
  return {
    ...chart,
    heightPx: Math.ceil(y + MARGIN - 22),
    slabs: [...chart.slabs, ...below.slabs],
    areas: [...(chart.areas ?? []), ...below.areas],
    veils: [...chart.veils, ...below.veils],
    under: [...chart.under, ...below.under],
    polylines: [...(chart.polylines ?? []), ...below.polylines],
    over: [...chart.over, ...below.over],
    marks: [...chart.marks, ...below.marks],
    texts: [...chart.texts, ...below.texts],
  };
}

type Below = (top: number) => { readonly ink: Ink; readonly bottom: number };

/** A panel whose plot stands right under the chart's own, point under point. */
function aligned(
  chart: Scene,
  ends: readonly EndWords[],
  options: Omit<PanelOptions, 'left' | 'rightRoom' | 'x'>,
): Panel {
  const { left, right, xDomain } = chart.frame;
  const under = {
    ...options,
    rightRoom: Math.max(endLabelsRoom(ends), WIDTH - MARGIN - right),
    x: { domain: xDomain, ticks: [] },
  };
  const first = panel(under);
  return panel({ ...under, left: MARGIN + Math.max(0, left - first.frame.left) });
}

function rangesPart(chart: Scene, { movingRanges, averageMovingRange, rangeUpper }: BesideRevenue): Below {
  const places = movingRanges.flatMap((y, i) => (y === null ? [] : [{ x: i + 1, y }]));
  const highest = Math.max(rangeUpper, ...places.map(({ y }) => y), 0.001);
  return (top) => {
    const title = words('Moving ranges: how far each point lies from the one before', { bold: true })(top);
    const ends: EndWords[] = [
      { y: rangeUpper, lines: ['usually below', percent(rangeUpper)], color: INK },
      { y: averageMovingRange, lines: ['on average', percent(averageMovingRange)], color: LEVEL },
    ];
    const plot = aligned(chart, ends, {
      top: title.bottom + 8,
      height: 120,
      y: { domain: [0, highest * 1.08], figures: 'percent' },
    });
    const [from, to] = chart.frame.xDomain;
    const wide = [
      { x: from, low: 0, high: rangeUpper },
      { x: to, low: 0, high: rangeUpper },
    ];
    const small = { ...DOT, area: places.length > 60 ? 24 : 44 };
    return {
      bottom: plot.bottom,
      ink: ink(
        title.ink,
        band(plot, wide, { color: WATER_PALE }),
        plot.axes,
        level(plot, rangeUpper, { color: WATER_EDGE, width: 1.8 }),
        level(plot, averageMovingRange, { color: LEVEL }),
        line(plot, places, { color: QUIET, width: 1.2 }),
        dots(
          plot,
          places.map((place) => ({ ...place, look: place.y > rangeUpper ? STANDOUT : small })),
        ),
        endLabels(plot, ends),
      ),
    };
  };
}

function besidePart(chart: Scene, { logo, contraction, expansion, totals }: BesideRevenue): Below {
  const series = [
    { values: logo, color: QUIET, name: 'accounts lost', total: totals.logo, dash: [6, 4] as const },
    ...(expansion ? [{ values: expansion, color: WATER_EDGE, name: 'expansion', total: totals.expansion }] : []),
    ...(contraction ? [{ values: contraction, color: SAND_INK, name: 'contraction', total: totals.contraction }] : []),
  ];
  const highest = Math.max(0.001, ...series.flatMap(({ values }) => values));
  return (top) => {
    const title = words(
      expansion
        ? 'Beside it, in the same points: accounts lost, and what those who stayed came to pay more or less'
        : 'Beside it, in the same points: accounts lost',
      { bold: true },
    )(top);
    const ends = series.map(
      ({ values, color, name, total }): EndWords => ({
        y: values.at(-1) ?? 0,
        lines: [name, `${percent(total)} in all`],
        color,
      }),
    );
    const plot = aligned(chart, ends, {
      top: title.bottom + 8,
      height: 150,
      y: { domain: [0, highest * 1.05], figures: 'percent' },
    });
    return {
      bottom: plot.bottom,
      ink: ink(
        title.ink,
        plot.axes,
        ...series.map(({ values, color, ...rest }) =>
          line(
            plot,
            values.map((y, i) => ({ x: i + 1, y })),
            { color, width: 2.4, ...('dash' in rest ? { dash: rest.dash } : {}) },
          ),
        ),
        endLabels(plot, ends),
      ),
    };
  };
}

/** Longest alternative text, in characters. */
const MOST = 1000;

/** The chart's own text, and what stands below it, as far as there is room. */
export function revenueAlt(
  input: PictureInput,
  { movingRanges, rangeUpper, totals, contraction }: BesideRevenue,
): string {
  const wide = movingRanges.filter((range) => range !== null && range > rangeUpper).length;
  const more = [
    `Below: the distance from each point to the one before, usually under ${percent(rangeUpper)}; ${wide === 0 ? 'none is' : `${wide} ${wide === 1 ? 'is' : 'are'}`} larger.`,
    capitalised(
      `in the same points ${percent(totals.logo)} of the accounts were lost${contraction ? `; contraction ${percent(totals.contraction)}, expansion ${percent(totals.expansion)} of the revenue` : ''}.`,
    ),
  ];
  let text = altText(input);
  for (const sentence of more) if (`${text} ${sentence}`.length <= MOST) text = `${text} ${sentence}`;
  return text;
}
