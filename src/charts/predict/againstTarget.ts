import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';
import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { clopperPearsonInterval } from '../intervals/clopperPearson.ts';
import { wilsonInterval, Z_95 } from '../intervals/wilson.ts';
import type { Interval, SubgroupCount } from '../types.ts';

export interface TargetTest {
  /** 95 % interval of the rate; it lies wholly below the target exactly when soFew <= 0.025, wholly above when soMany <= 0.025 */
  readonly interval: Interval;
  /** chance of so few lost, or fewer, if the true rate were the target */
  readonly soFew: number;
  /** chance of so many lost, or more, if the true rate were the target */
  readonly soMany: number;
  readonly method: 'exact' | 'score';
}

/** Each side's largest chance of a wrong "met" or "missed". */
export const TARGET_TAIL = 0.025;

/**
 * A pooled rate against a target.
 * @param pooled      accounts >= 1
 * @param target      0 < target < 1
 * @param dispersion  variance of the points over the binomial's; above 1 the score test takes the exact one's place, its variance widened
 * Method: one-sided exact binomial tests and the interval of Clopper and Pearson, which is their inverse; with dispersion the score test
 * and Wilson's interval, its inverse, both at sqrt(dispersion) times the binomial's sigma (quasi-likelihood; McCullagh and Nelder,
 * Generalized Linear Models, 1989, section 4.5, section from memory).
 */
export function againstTarget({ lost, accounts }: SubgroupCount, target: number, dispersion = 1): TargetTest {
  if (dispersion <= 1)
    return {
      interval: clopperPearsonInterval(lost, accounts),
      soFew: binomialCdf(lost, accounts, target),
      soMany: lost === 0 ? 1 : 1 - binomialCdf(lost - 1, accounts, target),
      method: 'exact',
    };
  const z = (lost / accounts - target) / Math.sqrt((dispersion * target * (1 - target)) / accounts);
  return {
    interval: wilsonInterval(lost, accounts, Z_95 * Math.sqrt(dispersion)),
    soFew: normalCdf(z, 0, 1),
    soMany: normalCdf(-z, 0, 1),
    method: 'score',
  };
}

/** Most accounts of `accounts` that may be lost with the target still met: equal to it counts as met. */
export function mostLost(accounts: number, target: number): number {
  return Math.min(accounts, Math.floor(accounts * target + 1e-9));
}
