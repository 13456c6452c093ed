import type { Interval, SubgroupCount } from '../types.ts';
import { wilsonInterval, Z_95 } from './wilson.ts';

/**
 * Hybrid score interval for the difference of two independent proportions, first minus second.
 * Source: Newcombe RG, Statistics in Medicine 17:873-890, 1998, method 10. Example: 56/70 - 48/80 gives 0.0524 to 0.3339.
 */
export function newcombeInterval(first: SubgroupCount, second: SubgroupCount, z = Z_95): Interval {
  const a = wilsonInterval(first.lost, first.accounts, z);
  const b = wilsonInterval(second.lost, second.accounts, z);
  const estimate = a.estimate - b.estimate;
  return {
    estimate,
    low: estimate - Math.hypot(a.estimate - a.low, b.high - b.estimate),
    high: estimate + Math.hypot(a.high - a.estimate, b.estimate - b.low),
  };
}
