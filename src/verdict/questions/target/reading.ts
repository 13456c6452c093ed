import { Z_95 } from '../../../charts/intervals/wilson.ts';
import { againstTarget, mostLost, TARGET_TAIL } from '../../../charts/predict/againstTarget.ts';
import { centralCounts, chanceOfAtMost, type Outlook, outlook } from '../../../charts/predict/nextPoints.ts';
import type { Chart, Interval } from '../../../charts/types.ts';
import type { Judgement } from '../../judgement.ts';
import { newestLevel, type OneLevel } from '../oneLevel.ts';

/** met, missed: beyond chance; unclear: neither; nobody, everybody: a target that no count can be tested against. */
export type TargetOutcome = 'met' | 'missed' | 'unclear' | 'nobody' | 'everybody';

/** The mean of the next points against the target, nothing having changed. */
export interface NextMean {
  readonly points: number;
  readonly accounts: number;
  /** most that may be lost with the target met */
  readonly mostLost: number;
  readonly chance: number;
}

export interface TargetReading {
  readonly target: number;
  readonly outcome: TargetOutcome;
  readonly stretch: OneLevel;
  readonly interval: Interval;
  readonly method: 'exact' | 'score';
  readonly soFew: number;
  readonly soMany: number;
  /** variance of the points over the binomial's that was allowed for; 1 when none had to be */
  readonly dispersion: number;
  readonly next: readonly NextMean[];
  /** where 9 of 10 next points fall, as rates */
  readonly nextRange: { readonly low: number; readonly high: number };
  readonly nextSize: number;
  /** points of the stretch that met the target by themselves */
  readonly pointsMet: number;
  /** accounts that would tell the level from the target if it stays where it is, those of the stretch included; null when they are equal */
  readonly accountsToTell: number | null;
}

const AHEAD = [1, 3, 6, 12];
/** Spread this unlikely under the binomial is taken as real, as by the judge. */
const OVERDISPERSED = 0.01;

/**
 * Reads the newest stretch of a chart against a target.
 * @param target    a rate, 0 to 1
 * @param nextSize  accounts of a point to come, >= 1
 */
export function readTarget(chart: Chart, judgement: Judgement, target: number, nextSize: number): TargetReading {
  const stretch = newestLevel(chart, judgement);
  const { pooled } = stretch;
  const spread = judgement.dispersion;
  const dispersion = spread && spread.pValue < OVERDISPERSED ? Math.max(1, spread.ratio) : 1;
  const size = pooled.accounts / stretch.counts.length;
  const correlation = size > 1 ? Math.min(0.9, (dispersion - 1) / (size - 1)) : 0;
  const ahead = outlook(pooled, correlation, dispersion);
  const tested = againstTarget(pooled, Math.min(Math.max(target, 1e-9), 1 - 1e-9), dispersion);
  return {
    target,
    outcome: outcomeOf(target, tested),
    stretch,
    ...tested,
    dispersion,
    next: AHEAD.map((points) => nextMean(ahead, points, nextSize, target)),
    nextRange: rangeOf(ahead, nextSize),
    nextSize,
    pointsMet: stretch.counts.filter(({ lost, accounts }) => lost <= mostLost(accounts, target)).length,
    accountsToTell: accountsToTell(pooled.lost / pooled.accounts, target, dispersion),
  };
}

function outcomeOf(target: number, { soFew, soMany }: { soFew: number; soMany: number }): TargetOutcome {
  if (target <= 0) return 'nobody';
  if (target >= 1) return 'everybody';
  if (soFew <= TARGET_TAIL) return 'met';
  return soMany <= TARGET_TAIL ? 'missed' : 'unclear';
}

function nextMean(ahead: Outlook, points: number, size: number, target: number): NextMean {
  const accounts = points * size;
  const most = mostLost(accounts, target);
  return { points, accounts, mostLost: most, chance: chanceOfAtMost(ahead.lostAmong(accounts, points), most) };
}

function rangeOf(ahead: Outlook, size: number): { low: number; high: number } {
  const { low, high } = centralCounts(ahead.lostAmong(size), 0.05);
  return { low: low / size, high: high / size };
}

/** From the score test at the target's own sigma. */
function accountsToTell(rate: number, target: number, dispersion: number): number | null {
  if (target <= 0 || target >= 1) return null;
  const needed = (Z_95 ** 2 * dispersion * target * (1 - target)) / (rate - target) ** 2;
  return Number.isFinite(needed) && needed < 1e7 ? Math.ceil(needed) : null;
}
