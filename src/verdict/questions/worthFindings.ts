import type { ConstantLifetime } from '../../charts/lifetimes/constantLifetime.ts';
import type { MeasuredLifetime } from '../../charts/lifetimes/measuredLifetime.ts';
import type { Interval, SubgroupCount } from '../../charts/types.ts';
import type { Day } from '../../days.ts';
import type { Outcome } from '../types.ts';
import type { TenureMonth } from './planFindings.ts';

/** Why there is no value, or what it is made from. Amounts are per month, in the currency of the column. */
export type AmountFindings =
  | { readonly kind: 'no-column' }
  | { readonly kind: 'currencies'; readonly currencies: readonly string[] }
  | { readonly kind: 'unusable'; readonly column: string; readonly reason: 'unreadable' | 'negative' | 'zero' }
  | {
      readonly kind: 'amounts';
      readonly column: string;
      readonly currency: string | null;
      /** months that an amount of the column pays for */
      readonly months: number;
      /** false when the column's name does not say so */
      readonly periodStated: boolean;
      readonly negative: number;
      readonly missing: number;
      readonly changed: number;
    };

/** Lifetime values in the currency of the column; null where the lifetime or the amount is. */
export interface Values {
  readonly perMonth: number;
  readonly accounts: number;
  /** over the measured months alone */
  readonly restricted: Interval | null;
  readonly measured: Interval | null;
  readonly constant: Interval | null;
}

/** A lifetime in months begun, with what it rests on. */
export interface EraLifetime extends MeasuredLifetime {
  /**
   * Months that these accounts have not reached and accounts from before the move have: taken from those, since tails of unequal stretches
   * would compare months that hold a renewal with months that hold none. Null when nothing is taken from others.
   */
  readonly borrowed: { readonly from: number; readonly to: number } | null;
  /** share still there by month, the borrowed ones included; as `survival` when there are none */
  readonly reached: readonly number[];
}

/** Accounts of one time: all, or those started before or since the move. */
export interface Era {
  /** lost by the tenure point, of the accounts that have reached it */
  readonly counts: SubgroupCount;
  /** null when no account has reached the tenure point */
  readonly constant: ConstantLifetime | null;
  /** null when too few accounts were watched through a first month */
  readonly measured: EraLifetime | null;
  readonly months: readonly TenureMonth[];
  /** accounts watched through their first month */
  readonly watched: number;
  readonly values: Values | null;
}

export interface WorthFindings {
  readonly tenure: string;
  readonly tenureMonths: number;
  /** what "has it moved?" answers for the same accounts; null where no chart fits them */
  readonly outcome: Outcome | null;
  /** the first start day of the moved accounts; null when nothing moved */
  readonly since: Day | null;
  readonly now: Era;
  /** null when nothing moved */
  readonly before: Era | null;
  /** mean stay over the months that both times have been watched for: nothing assumed; null when nothing moved */
  readonly common: {
    readonly months: number;
    readonly now: Interval;
    readonly before: Interval;
    readonly difference: Interval;
  } | null;
  readonly amount: AmountFindings;
}
