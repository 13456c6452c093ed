import { wilsonInterval, Z_95 } from '../intervals/wilson.ts';
import type { Interval, SubgroupCount } from '../types.ts';
import { compounded } from './compounding.ts';
import { geometricLifetime } from './geometricLifetime.ts';

export interface ConstantLifetime {
  /** hazard per period that compounds to the share lost */
  readonly hazard: Interval;
  /** first period by which half would have left; null when nobody was lost */
  readonly median: number | null;
  /** mean lifetime in periods begun: 1/hazard; null without an upper limit because nobody was lost */
  readonly mean: { readonly estimate: number | null; readonly low: number; readonly high: number | null };
}

/**
 * Mean lifetime if accounts went on leaving for ever at the pace at which they left up to one age.
 * @param counts   lost by that age, of accounts that have reached it; accounts >= 1
 * @param periods  that age in periods, > 0
 * Method: the share lost turned into a hazard per period, then 1/hazard; the limits are those of the Wilson interval of the share, carried
 * through the same formula (it is monotone).
 * Source: Wilson's interval, see intervals/wilson.ts.
 */
export function constantLifetime(counts: SubgroupCount, periods: number, z = Z_95): ConstantLifetime {
  const share = wilsonInterval(counts.lost, counts.accounts, z);
  const hazard = {
    estimate: compounded(share.estimate, 1 / periods),
    low: compounded(share.low, 1 / periods),
    high: compounded(share.high, 1 / periods),
  };
  return {
    hazard,
    median: hazard.estimate > 0 ? geometricLifetime(hazard.estimate).median : null,
    mean: {
      estimate: hazard.estimate > 0 ? geometricLifetime(hazard.estimate).mean : null,
      low: geometricLifetime(hazard.high).mean,
      high: hazard.low > 0 ? geometricLifetime(hazard.low).mean : null,
    },
  };
}
