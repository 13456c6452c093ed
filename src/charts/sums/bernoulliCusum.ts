import type { WatchSum } from './watchSum.ts';

/** One climb from zero that reached the limit. Accounts are numbered from 1 in order of start. */
export interface Alarm {
  /** the account at which the sum first reached the limit */
  readonly at: number;
  /** the last account of the climb at which it stood there; the newest account while the alarm stands */
  readonly until: number;
  /** the sum was last at zero after this many accounts; what moved it came after them */
  readonly zeroAfter: number;
}

export interface SumTrace {
  /** the sum after the newest account */
  readonly value: number;
  /** accounts after which it was last at zero; 0 when it never was since it began */
  readonly zeroAfter: number;
  readonly alarms: readonly Alarm[];
  /** the sum after each of the accounts asked about */
  readonly values: readonly number[];
}

/**
 * Runs one sum over accounts in order of start. It does not begin again after an alarm: while the last stretch of accounts speaks for the
 * move the sum stands beyond its limit, and it comes back when they no longer do.
 * @param losses    numbers of the lost accounts, ascending, from 1 to accounts
 * @param accounts  how many accounts there are
 * @param at        account numbers, ascending, from 0 to accounts, after which the value is wanted
 * Takes time in proportion to the losses, not the accounts.
 */
export function bernoulliCusum(
  sum: WatchSum,
  losses: ArrayLike<number>,
  accounts: number,
  at: readonly number[] = [],
): SumTrace {
  const { lostStep, keptStep, limit } = sum;
  const values: number[] = [];
  const alarms: Alarm[] = [];
  let value = sum.start;
  let done = 0;
  let zeroAfter = 0;
  let raised: { at: number; zeroAfter: number } | null = null;

  /** A sum that dips below its limit and comes back without having been at zero is still on the same climb. */
  const close = (alarm: { at: number; zeroAfter: number }, until: number): void => {
    const before = alarms.at(-1);
    if (before?.zeroAfter === alarm.zeroAfter) alarms[alarms.length - 1] = { ...before, until };
    else alarms.push({ ...alarm, until });
  };

  /** Goes on to account `to` in equal steps. */
  const advance = (to: number, step: number): void => {
    for (; values.length < at.length && at[values.length]! < to; ) {
      values.push(Math.max(0, value + step * (at[values.length]! - done)));
    }
    const from = value;
    value = Math.max(0, value + step * (to - done));
    if (step > 0) {
      if (raised === null && value >= limit) raised = { at: done + Math.ceil((limit - from) / step), zeroAfter };
    } else {
      if (raised !== null && value < limit) {
        close(raised, done + Math.floor((from - limit) / -step));
        raised = null;
      }
      if (value === 0) zeroAfter = to;
    }
    done = to;
  };

  for (let i = 0; i < losses.length; i++) {
    const loss = losses[i]!;
    if (loss - 1 > done) advance(loss - 1, keptStep);
    advance(loss, lostStep);
  }
  if (accounts > done) advance(accounts, keptStep);
  while (values.length < at.length) values.push(value);
  if (raised !== null) close(raised, accounts);
  return { value, zeroAfter, alarms, values };
}
