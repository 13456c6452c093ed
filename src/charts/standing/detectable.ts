import { betaBinomialSampler } from '../random/betaBinomialSampler.ts';
import { seededUniform, type Uniform } from '../random/uniform.ts';
import { historyCount } from './histories.ts';
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
const MOST_HISTORIES = 400;
const LEAST_HISTORIES = 60;

/**
 * The smallest rise and fall that this chart would by now have read as moved with the wanted chance, had the rate moved at `from` and
 * stayed there. Points before `from` are those of the chart: how well its own level was estimated is known, and needs no average.
 * @param lost       counts of the chart; those from `from` on play no part
 * @param rate       the usual level, from which the moves are measured
 * @param from       first moved point (numbered from 1)
 * @param threshold  ratio from standingThreshold
 * @param chance     e.g. 0.8
 * Method: bisection on the moved rate over seeded simulations with common random numbers, in a bracket around the move whose expected
 * log likelihood ratio reaches the threshold. At each point the uniform numbers of all histories are spread evenly (Latin hypercube
 * sampling; McKay MD, Beckman RJ, Conover WJ, Technometrics 21:239-245, 1979, reference from memory), which halves the error.
 */
export function smallestDetectable(
  design: BlockDesign,
  lost: ArrayLike<number>,
  rate: number,
  from: number,
  threshold: number,
  chance: number,
  seed = 2,
): Detectable {
  const judge = standingJudge(design);
  const histories = historyCount(design.accounts.length, MOST_HISTORIES, LEAST_HISTORIES);
  const sizes = design.accounts.slice(from - 1);
  const spread = evenUniforms(histories, sizes.length, seededUniform(seed));
  const simulated = Int32Array.from(design.accounts, (_, i) => (i < from - 1 ? lost[i]! : 0));
  const seen = (moved: number, side: 'above' | 'below'): boolean => {
    const known = new Map(
      [...new Set(sizes)].map((n) => [n, betaBinomialSampler(n, moved, design.correlation ?? 0)] as const),
    );
    const samplers = sizes.map((n) => known.get(n)!);
    let hits = 0;
    for (let history = 0; history < histories; history++) {
      for (let i = 0; i < samplers.length; i++)
        simulated[from - 1 + i] = samplers[i]!.quantile(spread[i * histories + history]!);
      if (judge(simulated)[side].score > threshold) hits++;
    }
    return hits / histories >= chance;
  };
  const accounts = sizes.reduce((sum, n) => sum + n, 0);
  // The ratio scatters by about sqrt(2 ratio) around its mean; 0.84 is the normal 80 % point. Only a place to start looking.
  const wanted = (threshold + 0.84 * Math.sqrt(2 * threshold)) / accounts;
  return {
    rise: smallestMove(rate, 1, expectedMove(rate, 1, wanted), (moved) => seen(moved, 'above')),
    fall: smallestMove(rate, 0, expectedMove(rate, 0, wanted), (moved) => seen(moved, 'below')),
    chance,
  };
}

/** For each point one uniform number in each of as many equal parts of (0, 1) as there are histories, in random order. */
function evenUniforms(histories: number, points: number, uniform: Uniform): Float64Array {
  const numbers = new Float64Array(histories * points);
  for (let point = 0; point < points; point++) {
    const column = numbers.subarray(point * histories, (point + 1) * histories);
    for (let i = 0; i < histories; i++) {
      const j = Math.floor(uniform() * (i + 1));
      column[i] = column[j]!;
      column[j] = (i + uniform()) / histories;
    }
  }
  return numbers;
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
