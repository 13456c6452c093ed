import { count } from '../words/format.ts';

/** A chance as cases: "in about 29 of 100", "in about 4 of 1,000", "in fewer than 1 of 10,000". */
export function inCases(chance: number): string {
  for (const of of [100, 1_000, 10_000]) {
    const cases = Math.round(chance * of);
    if (of === 100 && cases >= 100) return chance === 1 ? 'in 100 of 100' : 'in more than 99 of 100';
    if (cases >= (of === 100 ? 2 : 1)) return `in about ${cases} of ${count(of)}`;
  }
  return 'in fewer than 1 of 10,000';
}

/** A chance in percent, whole but near the ends: "62 %", "under 1 %", "over 99 %". */
export function chancePercent(chance: number): string {
  if (chance <= 0) return '0 %';
  if (chance >= 1) return '100 %';
  if (chance < 0.01) return 'under 1 %';
  if (chance > 0.99) return 'over 99 %';
  return `${Math.round(chance * 100)} %`;
}
