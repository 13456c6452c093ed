import { rounded, SOON_POINTS, subgroupSizes } from '../../../src/census/sizes.ts';
import type { PlanFindings } from '../../../src/verdict/questions/planFindings.ts';
import { sizeOffers } from '../../../src/verdict/questions/sizeOffers.ts';
import { tenureMonths } from '../../../src/verdict/questions/tenureMonths.ts';

/** Findings as a business with monthly and yearly renewals would give them; what matters to a test can be set. */
export function planExample(
  about: Partial<{
    rate: number;
    matured: number;
    inflowPerWeek: number;
    move: number;
    within: number;
    months: number;
    subgroupSize: number;
  }> = {},
): PlanFindings {
  const { rate = 0.06, matured = 5_400, inflowPerWeek = 45, move = 0.5, within = SOON_POINTS, months = 30 } = about;
  const sizes = subgroupSizes(rate);
  const subgroupSize = about.subgroupSize ?? sizes.fiveLosses;
  const sets = Array.from({ length: months }, (_, i) => {
    const atRisk = Math.round(matured * 0.94 ** i);
    return { time: i + 1, atRisk, lost: Math.round(atRisk * (i + 1 === 3 ? 0.05 : i + 1 === 12 ? 0.08 : 0.012)) };
  });
  return {
    tenure: '3 months',
    tenureMonths: 3,
    tenureWhy: 'read at 3 months, just after the first risky time',
    sizeWhy: `${subgroupSize} accounts a point`,
    subgroupSize,
    rate,
    assumedRate: rate,
    lost: Math.round(rate * matured),
    matured,
    immature: 300,
    inflowPerWeek,
    move,
    moveAsked: move !== 0.5,
    within,
    ...sizeOffers({
      rate,
      matured,
      inflowPerWeek,
      move,
      within,
      sizes,
      subgroupSize,
      asked: false,
      usualMove: { move: 0.5, within: SOON_POINTS },
      rounded,
    }),
    months: tenureMonths(sets, new Set([3, 12])),
    usualHazard: 0.012,
    medianMonth: { time: null, low: null, high: null },
    segmentColumn: 'plan',
    groups: [],
    logRank: null,
    earlyLogRank: null,
  };
}
