import { NELSON_POWER } from '../charts/kinds/gapsByPower.ts';
import type { Chart } from '../charts/types.ts';
import { pace } from '../verdict/gaps/phrases.ts';
import type { PictureInput, PooledRate } from '../verdict/types.ts';
import { valueWords } from '../verdict/values/valueWords.ts';
import { countOf, limitPercent, percent, percentRange } from './figures.ts';

/**
 * How the values of a chart are placed and put into words. Shares of accounts lie on an even scale. Gaps between losses are many short ones
 * and few very long ones: their scale is drawn out at the bottom, by the power through which such gaps scatter evenly around the centre
 * line, so that short ones can be told apart and the limits still fit. The axis and a note say so.
 */
export interface ValueScale {
  readonly of: 'rates' | 'gaps' | 'numbers';
  /** where on the even scale of the drawing a value goes */
  place(value: number): number;
  /** "6.2 %", "120 accounts", "15 days" */
  words(value: number): string;
  /** a limit beside the other one */
  limitWords(value: number, beside: number): string;
  /** on an axis */
  tickWords(value: number): string;
  /** what half of the points lie above, or what they lie around: the lines of the label at the end of the centre line */
  usualWords(center: number): readonly string[];
  sinceWords(level: number): readonly string[];
  /** "a rise to 6.2 % or more" */
  riseTo(rate: number): string;
  fallTo(rate: number): string;
  /** a pooled level: "2.1 % (1.2–3.4 %)", "one loss every 15 days" */
  levelWords(level: PooledRate): string;
}

const RATES: ValueScale = {
  of: 'rates',
  place: (value) => value,
  words: percent,
  limitWords: limitPercent,
  tickWords: percent,
  usualWords: (center) => ['usual level', percent(center)],
  sinceWords: (level) => ['since then', `about ${percent(level)}`],
  riseTo: (rate) => `a rise to ${percent(rate)} or more`,
  fallTo: (rate) => `a fall to ${percent(rate)} or less`,
  levelWords: (level) => `${percent(level.rate)} (${percentRange(level.low, level.high)})`,
};

const gaps = (unit: 'account' | 'day'): ValueScale => {
  const words = (value: number): string => countOf(Math.round(value), unit);
  return {
    of: 'gaps',
    place: (value) => Math.max(0, value) ** NELSON_POWER,
    words,
    limitWords: words,
    tickWords: (value) => value.toLocaleString('en-US'),
    usualWords: (center) => ['usual gap:', 'half of all', `above ${words(center)}`],
    sinceWords: (level) => ['since then half', `above ${words(level)}`],
    ...(unit === 'account'
      ? { riseTo: RATES.riseTo, fallTo: RATES.fallTo, levelWords: RATES.levelWords }
      : {
          riseTo: (rate) => `a rise to ${pace(rate)} or more often`,
          fallTo: (rate) => `a fall to ${pace(rate)} or more rarely`,
          levelWords: (level) => pace(level.rate),
        }),
  };
};

const ACCOUNTS = gaps('account');
const DAYS = gaps('day');

/** Ready values, whose unit only their owner knows. */
const NUMBERS: ValueScale = {
  of: 'numbers',
  place: (value) => value,
  words: valueWords,
  limitWords: valueWords,
  tickWords: valueWords,
  usualWords: (center) => ['usual level', valueWords(center)],
  sinceWords: (level) => ['since then', `about ${valueWords(level)}`],
  riseTo: (level) => `a rise to ${valueWords(level)} or more`,
  fallTo: (level) => `a fall to ${valueWords(level)} or less`,
  levelWords: (level) => valueWords(level.rate),
};

export function valueScale(chart: Chart | null): ValueScale {
  if (chart?.scale === 'accounts') return ACCOUNTS;
  if (chart?.scale === 'days') return DAYS;
  if (chart?.scale === 'score') return NUMBERS;
  return RATES;
}

/** The levels before and since a move, as they are plotted. */
export function plottedLevels({ verdict, levels }: PictureInput): { before: number | null; after: number | null } {
  return levels ?? { before: verdict.before?.rate ?? null, after: verdict.after?.rate ?? null };
}

/** The chart with every value where it is drawn. */
export function placedChart(chart: Chart, scale: ValueScale): Chart {
  if (scale.of !== 'gaps') return chart;
  return {
    ...chart,
    center: scale.place(chart.center),
    points: chart.points.map((point) => ({
      ...point,
      value: scale.place(point.value),
      lower: scale.place(point.lower),
      upper: scale.place(point.upper),
    })),
  };
}
