import type { Interval } from '../types.ts';
import { Z_95 } from './wilson.ts';

/**
 * Interval for a rate of events over time, from how many there were.
 * @param events    whole number >= 0
 * @param exposure  time (or anything they happen in), > 0; the rate is per unit of it
 * Method: Byar's approximation to the exact Poisson limits: 10 events have 4.79 to 18.39 where the exact limits are 4.795 and 18.39; below
 * about 5 events the lower limit is lower than the exact one, so the interval is a little too wide. 0 events have the exact upper limit.
 * Source: Breslow NE and Day NE, Statistical Methods in Cancer Research II, IARC 1987, section 2.3 (reference from memory).
 */
export function poissonInterval(events: number, exposure: number, z = Z_95): Interval {
  const upTo = events + 1;
  const low = events === 0 ? 0 : events * (1 - 1 / (9 * events) - z / (3 * Math.sqrt(events))) ** 3;
  const high = events === 0 ? -Math.log(0.025) : upTo * (1 - 1 / (9 * upTo) + z / (3 * Math.sqrt(upTo))) ** 3;
  return { estimate: events / exposure, low: Math.max(0, low) / exposure, high: high / exposure };
}
