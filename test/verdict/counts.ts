import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import type { SubgroupCount } from '../../src/charts/types.ts';

/** Points of one size that lose these numbers of accounts. */
export const points = (accounts: number, lost: readonly number[]): SubgroupCount[] =>
  lost.map((d) => ({ accounts, lost: d }));

/** A calm level: counts that go round these without a run, a trend or a far point. */
export const calm = (length: number, around: readonly number[] = [6, 5, 7, 6, 5, 6, 7, 5]): number[] =>
  Array.from({ length }, (_, i) => around[i % around.length]!);

/** Binomial counts by seed. */
export function drawn(seed: number, length: number, accounts: number, rate: number): number[] {
  const uniform = seededUniform(seed);
  const sampler = binomialSampler(accounts, rate);
  return Array.from({ length }, () => sampler.draw(uniform));
}
