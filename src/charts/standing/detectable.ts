import { historyCount, simulateHistories } from './histories.ts';
import type { BlockDesign } from './lastBlock.ts';
import { standingJudge } from './standing.ts';

export interface Detectable {
  /** smallest higher rate that would by now read as risen with the wanted chance; null when even certain loss would not */
  readonly rise: number | null;
  /** smallest fall: the highest lower rate that would read as fallen; null when even no loss at all would not */
  readonly fall: number | null;
  readonly chance: number;
}

/** Bisection steps: the answer is known to 1/1000 of the range searched, finer than the simulation's own error. */
const STEPS = 10;

/**
 * The smallest rise and fall that this chart would by now have read as moved with the wanted chance, had the rate moved at `from` and
 * stayed there.
 * @param from       first moved point (numbered from 1)
 * @param threshold  ratio from standingThreshold
 * @param chance     e.g. 0.8
 * Method: bisection on the moved rate over seeded simulations with common random numbers.
 */
export function smallestDetectable(
  design: BlockDesign,
  rate: number,
  from: number,
  threshold: number,
  chance: number,
  seed = 2,
): Detectable {
  const histories = Math.max(300, Math.floor(historyCount(design.accounts.length) / 4));
  const judge = standingJudge(design);
  const seen = (moved: number, side: 'above' | 'below'): boolean => {
    let hits = 0;
    const pieces =
      from > 1
        ? [
            { from: 1, rate },
            { from, rate: moved },
          ]
        : [{ from: 1, rate: moved }];
    simulateHistories(design, pieces, histories, seed, (lost) => {
      if (judge(lost)[side].score > threshold) hits++;
    });
    return hits / histories >= chance;
  };

  let rise: number | null = null;
  // Double the rate until it is seen, then halve the gap: most answers lie within a few doublings.
  let low = rate;
  let high = rate;
  while (high < 1 && rise === null) {
    low = high;
    high = Math.min(1, high * 2);
    if (seen(high, 'above')) rise = high;
  }
  if (rise !== null) {
    for (let step = 0; step < STEPS - 3; step++) {
      const middle = (low + high) / 2;
      if (seen(middle, 'above')) high = middle;
      else low = middle;
    }
    rise = high;
  }

  let fall: number | null = null;
  if (seen(0, 'below')) {
    let enough = 0;
    let short = rate;
    for (let step = 0; step < STEPS; step++) {
      const middle = (enough + short) / 2;
      if (seen(middle, 'below')) enough = middle;
      else short = middle;
    }
    fall = enough;
  }
  return { rise, fall, chance };
}
