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

/** Bisection steps within the bracket: the answer is known to about 1/30 of the move, finer than the error of the simulation itself. */
const STEPS = 5;
const MOST_HISTORIES = 200;
const LEAST_HISTORIES = 60;

/**
 * The smallest rise and fall that this chart would by now have read as moved with the wanted chance, had the rate moved at `from` and
 * stayed there.
 * @param from       first moved point (numbered from 1)
 * @param threshold  ratio from standingThreshold
 * @param chance     e.g. 0.8
 * Method: bisection on the moved rate over seeded simulations with common random numbers, in a bracket around the move whose expected
 * log likelihood ratio reaches the threshold.
 */
export function smallestDetectable(
  design: BlockDesign,
  rate: number,
  from: number,
  threshold: number,
  chance: number,
  seed = 2,
): Detectable {
  const judge = standingJudge(design);
  const histories = historyCount(design.accounts.length, MOST_HISTORIES, LEAST_HISTORIES);
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
  const accounts = design.accounts.slice(from - 1).reduce((sum, n) => sum + n, 0);
  // The ratio scatters by about sqrt(2 ratio) around its mean; 0.84 is the normal 80 % point. Only a place to start looking.
  const wanted = (threshold + 0.84 * Math.sqrt(2 * threshold)) / accounts;
  return {
    rise: smallestMove(rate, 1, expectedMove(rate, 1, wanted), (moved) => seen(moved, 'above')),
    fall: smallestMove(rate, 0, expectedMove(rate, 0, wanted), (moved) => seen(moved, 'below')),
    chance,
  };
}

/** Rate between `rate` and `limit` whose information against `rate` per account is `wanted`; the limit when none is that informative. */
export function expectedMove(rate: number, limit: 0 | 1, wanted: number): number {
  let near = rate;
  let far: number = limit;
  for (let step = 0; step < 40; step++) {
    const middle = (near + far) / 2;
    const information = middle * Math.log(middle / rate) + (1 - middle) * Math.log((1 - middle) / (1 - rate));
    if (information < wanted) near = middle;
    else far = middle;
  }
  return far;
}

/** Smallest move from `rate` towards `limit` that is seen, looked for around `guess`; null when not even the limit is. */
export function smallestMove(
  rate: number,
  limit: 0 | 1,
  guess: number,
  seen: (moved: number) => boolean,
): number | null {
  const move = (size: number): number => (limit === 1 ? Math.min(1, rate + size) : Math.max(0, rate - size));
  const reach = Math.abs(limit - rate);
  let enough = Math.min(reach, 1.3 * Math.abs(guess - rate));
  let short = 0;
  while (!seen(move(enough))) {
    if (enough >= reach) return null;
    short = enough;
    enough = Math.min(reach, 2 * enough);
  }
  if (short === 0) {
    const lower = 0.6 * enough;
    if (seen(move(lower))) enough = lower;
    else short = lower;
  }
  for (let step = 0; step < STEPS; step++) {
    const middle = (short + enough) / 2;
    if (seen(move(middle))) enough = middle;
    else short = middle;
  }
  return move(enough);
}
