import { type Day, dayInWords } from '../../days.ts';
import { count } from '../../verdict/words/format.ts';
import { dateShort, monthShort, yearOf } from '../figures.ts';

/** A place on an axis and its words, a line each. */
export interface Tick {
  readonly at: number;
  readonly lines: readonly string[];
}

/** What the numbers of an axis are: rates as fractions, whole counts, plain numbers, or day numbers. */
export type Figures = 'percent' | 'count' | 'number' | 'date';

/**
 * The step of 1, 2, 2.5 or 5 times a power of ten that cuts a span into about `wanted` parts, never into more.
 * @param span   > 0
 */
export function niceStep(span: number, wanted: number, figures: Figures = 'number'): number {
  const wish = span / Math.max(1, wanted);
  const power = 10 ** Math.floor(Math.log10(wish));
  const step = ([1, 2, 2.5, 5].find((one) => one * power >= wish * 0.9999) ?? 10) * power;
  // Half an account is no account.
  return figures === 'count' ? Math.max(1, Number.isInteger(step) ? step : Math.ceil(step)) : step;
}

/** Whether two values differ by enough to draw a span between them. */
export function apart(low: number, high: number): boolean {
  return high - low > Math.max(1e-9, 1e-9 * Math.max(Math.abs(low), Math.abs(high)));
}

/** All multiples of a nice step within [low, high]. */
export function niceTicks(low: number, high: number, wanted: number, figures: Figures = 'number'): number[] {
  if (!apart(low, high)) return [low];
  const step = niceStep(high - low, wanted, figures);
  const first = Math.ceil(low / step - 1e-9);
  const last = Math.floor(high / step + 1e-9);
  return Array.from({ length: last - first + 1 }, (_, i) => Number(((first + i) * step).toPrecision(12)));
}

/** [low, high] widened to whole nice steps. Equal ends are set apart first, so that there is always a span to draw. */
export function niceDomain(low: number, high: number, wanted = 4, figures: Figures = 'number'): [number, number] {
  const [from, to] = apart(low, high)
    ? [low, high]
    : Math.abs(low) < 1e-8
      ? [0, 1]
      : [Math.min(0, low * 2), Math.max(0, low * 2)];
  const step = niceStep(to - from, wanted, figures);
  const first = Math.floor(from / step + 1e-9);
  return [first * step, Math.max(first + 1, Math.ceil(to / step - 1e-9)) * step];
}

/** The ticks of an axis in words, with as many decimals as their distance needs. */
export function wordedTicks(values: readonly number[], figures: Figures): Tick[] {
  if (figures === 'date') return values.map((day) => ({ at: day, lines: [dateShort(day)] }));
  const scale = figures === 'percent' ? 100 : 1;
  const distances = values.slice(1).map((value, i) => Math.abs(value - (values[i] ?? 0)) * scale);
  const step = distances.length > 0 ? Math.min(...distances) : Math.max(1, Math.abs(values[0] ?? 1) * scale);
  const digits = figures === 'count' ? 0 : ([0, 1, 2, 3, 4].find((n) => whole(step * 10 ** n)) ?? 4);
  return values.map((value) => {
    const shown = value * scale;
    const zero = Math.abs(shown) < 1e-12;
    const words = zero ? '0' : Math.abs(shown) >= 1000 ? count(shown) : Math.abs(shown).toFixed(digits);
    const signed = !zero && shown < 0 ? `−${words.replace('-', '')}` : words;
    return { at: value, lines: [figures === 'percent' ? `${signed}\u00a0%` : signed] };
  });
}

function whole(value: number): boolean {
  return Math.abs(value - Math.round(value)) < 1e-6 * Math.max(1, Math.abs(value));
}

const MONTH_STEPS = [1, 2, 3, 6, 12, 24, 60, 120];

/** Ways to mark a stretch of days, from close to wide: whole months with the year below where it changes, or a few days when it is short. */
export function dateTickChoices(low: Day, high: Day): Tick[][] {
  const choices: Tick[][] = [];
  if (high - low < 100)
    for (const every of [1, 2, 7, 14, 28])
      choices.push(
        Array.from({ length: Math.floor((high - low) / every) + 1 }, (_, i) => Math.ceil(low) + i * every)
          .filter((day) => day <= high)
          .map((day, i, all) => dayTick(day, all[i - 1])),
      );
  for (const step of MONTH_STEPS) {
    const days = monthStarts(low, high, step);
    if (days.length >= 2)
      choices.push(
        days.map((day, i) => {
          const before = days[i - 1];
          const year = before === undefined || yearOf(before) !== yearOf(day) ? String(yearOf(day)) : '';
          return {
            at: day,
            lines: step >= 12 ? [String(yearOf(day))] : year ? [monthShort(day), year] : [monthShort(day)],
          };
        }),
      );
  }
  choices.push([low, high].map((day) => ({ at: day, lines: [dateShort(Math.round(day))] })));
  choices.push([{ at: low, lines: [dateShort(Math.round(low))] }]);
  return choices;
}

function dayTick(day: Day, before: Day | undefined): Tick {
  const text = `${dayInWords(day).split(' ')[0]}\u00a0${monthShort(day)}`;
  const year = before === undefined || yearOf(before) !== yearOf(day) ? [String(yearOf(day))] : [];
  return { at: day, lines: [text, ...year] };
}

/** First days of months within [low, high], every `step` months counted from January. */
function monthStarts(low: Day, high: Day, step: number): Day[] {
  const days: Day[] = [];
  const first = new Date(Math.ceil(low) * 86_400_000);
  let month = Math.floor((first.getUTCFullYear() * 12 + first.getUTCMonth()) / step) * step;
  for (; ; month += step) {
    const day = Date.UTC(Math.floor(month / 12), month % 12, 1) / 86_400_000;
    if (day > high) return days;
    if (day >= low) days.push(day);
  }
}
