import type { LogRank } from '../../charts/survival/logRank.ts';
import type { SurvivalQuantile } from '../../charts/survival/survivalQuantile.ts';
import type { Interval } from '../../charts/types.ts';

/** Hazard of one month of tenure, and the share still there at its end. */
export interface TenureMonth {
  readonly month: number;
  readonly atRisk: number;
  readonly lost: number;
  /** lost / atRisk with Wilson's limits */
  readonly hazard: Interval;
  /** Kaplan-Meier with Greenwood's error and log-log limits; no error once nobody is left */
  readonly survival: number;
  readonly standardError: number | null;
  readonly low: number | null;
  readonly high: number | null;
  /** Nelson-Aalen: the hazards up to this month, added up */
  readonly cumulativeHazard: number;
  /** stands out from the usual month */
  readonly risky: boolean;
}

export type SizeReason = 'five-losses' | 'positive-lower-limit' | 'sees-move' | 'asked' | 'recommended';

/** One subgroup size and what it costs in waiting. Weeks are null when no accounts come in. */
export interface SizeOffer {
  /** why this size; two reasons may come to the same one */
  readonly reasons: readonly SizeReason[];
  readonly subgroupSize: number;
  readonly chosen: boolean;
  readonly pointsNow: number;
  readonly weeksPerPoint: number | null;
  /** weeks until there are enough points for a first verdict; 0 when there are */
  readonly weeksUntilVerdict: number | null;
  /** points between two false flags */
  readonly falseAlarmEvery: number | null;
  /** mean number of points until the move is flagged; null when it never would be */
  readonly delayPoints: number | null;
  readonly delayWeeks: number | null;
  /** chance that the move is flagged within the stated number of points */
  readonly chanceWithin: number;
}

export interface GroupPace {
  readonly segment: string;
  readonly accounts: number;
  readonly lost: number;
  /** losses if all groups left at the same pace; null when no test was possible */
  readonly expected: number | null;
  /** share still there at the tenure point, with log-log limits */
  readonly survival: number;
  readonly low: number | null;
  readonly high: number | null;
  /** mean days stayed of those up to the tenure point, and its standard error */
  readonly meanDays: number;
  readonly meanDaysError: number;
}

/** All that the plan rests on: finished numbers, no words but those that "has it moved?" uses for its choice. */
export interface PlanFindings {
  readonly tenure: string;
  /** the tenure point in months, to be marked on an axis */
  readonly tenureMonths: number;
  readonly tenureWhy: string;
  readonly sizeWhy: string;
  readonly subgroupSize: number;
  /** lost share at the tenure point, of the matured; and what sizes were worked out for when nobody or everybody was lost */
  readonly rate: number;
  readonly assumedRate: number;
  readonly lost: number;
  readonly matured: number;
  readonly immature: number;
  readonly inflowPerWeek: number;
  /** factor on the rate that should be seen, and within how many points */
  readonly move: number;
  readonly moveAsked: boolean;
  readonly within: number;
  /** null when the move is none, or leads out of what a rate can be */
  readonly movedRate: number | null;
  /** null when no size sees the move */
  readonly sizeForMove: number | null;
  readonly offers: readonly SizeOffer[];
  /** mean delay by size; weeks, or accounts when no accounts come in */
  readonly curve: readonly { readonly subgroupSize: number; readonly points: number; readonly delay: number }[];
  /** months observed on enough accounts, in order; empty when there are none */
  readonly months: readonly TenureMonth[];
  /** hazard of the usual month; null when too few can be looked at */
  readonly usualHazard: number | null;
  /** month by which half have left, with its 95 % limits; null where they have not */
  readonly medianMonth: SurvivalQuantile;
  readonly segmentColumn: string | null;
  readonly groups: readonly GroupPace[];
  readonly logRank: LogRank | null;
  /** the same, weighted towards the early days */
  readonly earlyLogRank: LogRank | null;
}
