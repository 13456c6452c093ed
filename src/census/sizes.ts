/** A halving counts as seen soon when it is flagged within this many points in four cases out of five. */
export const SOON_POINTS = 6;
const SOON_CHANCE = 0.8;

/**
 * The three subgroup sizes, each rounded up to a multiple of five (from 20 on).
 * fiveLosses: at least 5 expected losses and 5 expected keepers (common practice, no source).
 * positiveLowerLimit: n > 9(1-p)/p, so that p - 3 sqrt(p(1-p)/n) > 0.
 * seesHalving: the smallest size with which a fall to p/2 is flagged within SOON_POINTS points with a chance of 80 %.
 * @param rate  0 < p < 1
 */
export function subgroupSizes(rate: number): { fiveLosses: number; positiveLowerLimit: number; seesHalving: number } {
  const positive = Math.floor((9 * (1 - rate)) / rate) + 1;
  const five = Math.ceil(5 / Math.min(rate, 1 - rate) - 1e-9);
  let halving = Math.max(2, Math.ceil(1 / rate));
  while (chanceSeen(halving, rate, rate / 2) < SOON_CHANCE) halving = Math.ceil(halving * 1.05);
  return { fiveLosses: rounded(five), positiveLowerLimit: rounded(positive), seesHalving: rounded(halving) };
}

/**
 * Size at which a rise from `rate` by `rise` takes the expected share lost up to the upper 3 sigma limit, so that about every second point lies
 * beyond it. Not rounded.
 * @param rate  0 < rate < 1
 * @param rise  in the rate's own unit, a fraction, above 0
 * Source: Duncan AJ, Quality Control and Industrial Statistics (rule and example from memory).
 * Example: from 1 % to 5 %, 56 accounts (55.69); the exact chance is then 53.5 %, since counts are whole numbers.
 */
export function sizeThatReachesLimit(rate: number, rise: number): number {
  return (9 * rate * (1 - rate)) / rise ** 2;
}

export function rounded(size: number): number {
  return size < 20 ? size : Math.ceil(size / 5) * 5;
}

/**
 * The chance that a fall from `rate` to `moved` is flagged within SOON_POINTS points by the tests that answer soon: one point beyond three sigma,
 * two of three beyond two, four of five beyond one, all on the lower side. Exact for known `rate`: binomial zone probabilities, then a
 * Markov chain over the zones of the last four points.
 */
export function chanceSeen(size: number, rate: number, moved: number, points = SOON_POINTS): number {
  const sigma = Math.sqrt((rate * (1 - rate)) / size);
  // zone 0: within one sigma or above; 1, 2, 3: beyond one, two, three sigma on the lower side
  const below = [1, 2, 3].map((k) => binomialBelow(size * (rate - k * sigma), size, moved));
  const [one = 0, two = 0, three = 0] = below;
  const zones = [1 - one, one - two, two - three, three];
  // A state is the zones of the last four points as the digits of a number in base four, the newest last.
  let states = new Float64Array(256);
  states[0] = 1;
  let seen = 0;
  for (let point = 0; point < points; point++) {
    const next = new Float64Array(256);
    for (let state = 0; state < 256; state++) {
      const chance = states[state] ?? 0;
      if (chance === 0) continue;
      for (const [zone, zoneChance] of zones.entries()) {
        if (flags(state, zone)) seen += chance * zoneChance;
        else {
          const after = ((state << 2) | zone) & 255;
          next[after] = (next[after] ?? 0) + chance * zoneChance;
        }
      }
    }
    states = next;
  }
  return seen;
}

function flags(lastFour: number, newest: number): boolean {
  if (newest === 3) return true;
  const zoneBefore = (points: number): number => (lastFour >> (2 * (points - 1))) & 3;
  if (newest === 2 && (zoneBefore(1) >= 2 || zoneBefore(2) >= 2)) return true;
  if (newest === 0) return false;
  let beyondOne = 1;
  for (let points = 1; points <= 4; points++) if (zoneBefore(points) >= 1) beyondOne++;
  return beyondOne >= 4;
}

/** P(X < limit) for X binomial; strictly below, as "beyond" is strict. */
function binomialBelow(limit: number, size: number, p: number): number {
  let sum = 0;
  let logTerm = size * Math.log1p(-p);
  const odds = Math.log(p) - Math.log1p(-p);
  for (let k = 0; k < limit - 1e-9 && k <= size; k++) {
    sum += Math.exp(logTerm);
    logTerm += Math.log((size - k) / (k + 1)) + odds;
  }
  return Math.min(1, sum);
}
