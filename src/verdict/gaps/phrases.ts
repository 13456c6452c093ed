import { dayInWords } from '../../days.ts';
import type { PooledRate } from '../types.ts';
import { count, counted, percent } from '../words/format.ts';
import type { GapContext } from './types.ts';

/** " for Orchard" or nothing. */
export function whose({ segment }: GapContext): string {
  return segment === null ? '' : ` for ${segment}`;
}

/** "lost within 3 months"; just "lost" for ready gaps. */
export function lostBy({ tenure }: GapContext): string {
  return tenure === null ? 'lost' : `lost within ${tenure}`;
}

/** A length of time or a number of days as people say it: "15 days", "1.4 days". */
export function days(length: number): string {
  return length < 9.95 ? `${length.toFixed(1)} days` : counted(length, 'day');
}

/** Losses a day as a pace: "one loss every 15 days", "1.3 losses a day". */
export function pace(perDay: number): string {
  if (perDay <= 0) return 'no loss';
  return perDay > 0.95 ? `${perDay.toFixed(1)} losses a day` : `one loss every ${days(1 / perDay)}`;
}

/** A gap as it is plotted: "120 accounts", "15 days". */
export function gapLength(kind: 'g' | 't', gap: number): string {
  if (kind === 'g') return counted(gap, 'account');
  return Number.isInteger(gap) || gap >= 10 ? counted(gap, 'day') : `${gap.toFixed(1)} days`;
}

/** The level of a stretch with its denominators: "0.8 % (25 of 3,100 accounts; 95 % interval 0.5 % to 1.2 %)". */
export function levelWords(rate: PooledRate): string {
  if (rate.days === undefined)
    return `${percent(rate.rate)} (${count(rate.lost)} of ${counted(rate.accounts, 'account')}; 95 % interval ${percent(rate.low)} to ${percent(rate.high)})`;
  const often = rate.high > 0.95 ? pace(rate.high) : `one every ${days(1 / rate.high)}`;
  const seldom = rate.low > 0 ? (rate.low > 0.95 ? pace(rate.low) : `one every ${days(1 / rate.low)}`) : 'none at all';
  return `${pace(rate.rate)} (${counted(rate.lost, 'loss', 'losses')} in ${counted(rate.days, 'day')}; 95 % interval ${often} to ${seldom})`;
}

/** "gaps 31 to 39, accounts that started 12 March to 9 June 2025". */
export function gapsWords(first: number, last: number, { kind, dates, losses }: GapContext): string {
  const open = last > losses;
  const name =
    first === last
      ? open
        ? 'the time since the last loss'
        : `gap ${first}`
      : `gaps ${first} to ${open ? `${losses}, and since the last loss` : last}`;
  const from = dates[first - 1]?.firstStart ?? null;
  const to = dates[last - 1]?.lastStart ?? null;
  if (from === null || to === null) return name;
  return `${name}, ${kind === 'g' ? 'accounts that started ' : ''}${dayInWords(from)} to ${dayInWords(to)}`;
}
