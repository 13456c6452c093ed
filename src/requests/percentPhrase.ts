import { numberOf } from './numbers.ts';
import type { Token } from './tokens.ts';

export interface PercentFound {
  /** a fraction */
  readonly rate: number;
  /** decimals of the percentage as it was given */
  readonly decimals: number;
  readonly at: number;
}

/**
 * The first percentage in a sentence: "5 %", "14.2%", "5 percent"; a bare number up to 1 with decimals is taken for a fraction ("0.05"),
 * any other bare number for a percentage, when it is not the number of an age or a date.
 */
export function percentAt(sentence: string, list: readonly Token[]): PercentFound | undefined {
  const marked = list.findIndex((token, i) => numberOf(token) !== undefined && isMarked(sentence, list, i));
  const at = marked >= 0 ? marked : list.findIndex((token, i) => numberOf(token) !== undefined && isBare(list, i));
  const value = numberOf(list[at]);
  if (value === undefined) return undefined;
  const decimals = list[at]!.text.split('.')[1]?.length ?? 0;
  if (marked < 0 && value <= 1 && decimals > 0) return { rate: value, decimals: Math.max(0, decimals - 2), at };
  // 14.2 / 100 is 0.14199999999999999: a fraction is kept as it would be written.
  return { rate: Number((value / 100).toPrecision(12)), decimals, at };
}

function isMarked(sentence: string, list: readonly Token[], i: number): boolean {
  const after = sentence.slice(list[i]!.to).trimStart();
  return after.startsWith('%') || /^(percent|per cent|pct|prozent)\b/i.test(after);
}

const UNITS = /^(day|week|month|quarter|year|d|w|m|y|mo|mth|yr|point|account|customer|subgroup)s?$/;
const SIZES = new Set(['of', 'baseline', 'subgroups', 'subgroup', 'n', 'size']);

function isBare(list: readonly Token[], i: number): boolean {
  return (
    !UNITS.test(list[i + 1]?.text ?? '') && !(SIZES.has(list[i - 1]?.text ?? '') && list[i - 2]?.text !== 'target')
  );
}
