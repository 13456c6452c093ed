/** A sum that takes whole steps: up with a chance, else down, never below zero, until it reaches its limit. */
export interface SumWalk {
  /** whole steps, >= 1 */
  readonly up: number;
  readonly down: number;
  /** chance of a step up, strictly between 0 and 1 */
  readonly chanceUp: number;
  /** whole, >= 1 */
  readonly limit: number;
  /** where it starts, whole, from 0 to limit - 1; 0 when absent */
  readonly start?: number;
}

/**
 * Mean number of steps until the sum reaches its limit, exactly: the linear equations of the Markov chain on 0, 1, ..., limit - 1.
 * Solved by sums of positive numbers only, so that nothing is lost to rounding however long the run; in time limit * up * down, and in time
 * limit where the sum goes up by ones.
 * Source: Brook D and Evans DA, Biometrika 59:539-548, 1972, for the chain; Grassmann WK, Taksar MI and Heyman DP, Operations Research
 * 33:1107-1116, 1985, for elimination without subtraction (both references from memory).
 */
export function sumRunLength(walk: SumWalk): number {
  return walk.up === 1 ? upByOnes(walk) : fromTheTop(walk);
}

/** Level by level upwards: the mean time from s to s + 1 holds the way back up from wherever a step down leads. */
function upByOnes({ down, chanceUp, limit, start = 0 }: SumWalk): number {
  const climb = new Float64Array(limit);
  let mean = 0;
  let back = 0;
  for (let s = 0; s < limit; s++) {
    climb[s] = (1 + (1 - chanceUp) * back) / chanceUp;
    if (s >= start) mean += climb[s]!;
    back += climb[s]!;
    if (s >= down) back -= climb[s - down]!;
  }
  return mean;
}

/**
 * Level by level downwards. For every level it is worked out how the sum first gets below it: the mean number of steps, the chance of each
 * of the `down` levels just below, and the chance that it reaches the limit instead.
 */
function fromTheTop({ up, down, chanceUp, limit, start = 0 }: SumWalk): number {
  const chanceDown = 1 - chanceUp;
  const steps = new Float64Array(limit);
  const escapes = new Float64Array(limit);
  /** chance of getting below level s at s - 1 - j: below[s * down + j] */
  const below = new Float64Array(limit * down);
  // Chances of the levels s + up ... s - down, one after the other, on the way from s down.
  const chances = new Float64Array(up + down + 1);
  for (let s = limit - 1; s >= 0; s--) {
    let mean = 1;
    let out = 0;
    chances.fill(0);
    if (s + up < limit) chances[0] = chanceUp;
    else out = chanceUp;
    chances[up + Math.min(down, s)]! += chanceDown;
    for (let i = s + up < limit ? 0 : up; i < up; i++) {
      const chance = chances[i]!;
      if (chance === 0) continue;
      const level = s + up - i;
      mean += chance * steps[level]!;
      out += chance * escapes[level]!;
      for (let j = 0; j < down; j++) chances[i + 1 + j]! += chance * below[level * down + j]!;
    }
    // What comes back to s is tried again until it leaves: downwards, or out.
    let leaves = out;
    for (let j = 0; j < down; j++) leaves += chances[up + 1 + j]!;
    steps[s] = mean / leaves;
    escapes[s] = out / leaves;
    for (let j = 0; j < down; j++) below[s * down + j] = chances[up + 1 + j]! / leaves;
  }
  for (let s = 1; s <= start; s++) {
    for (let j = 0; j < Math.min(down, s); j++) steps[s]! += below[s * down + j]! * steps[s - 1 - j]!;
  }
  return steps[start]!;
}
