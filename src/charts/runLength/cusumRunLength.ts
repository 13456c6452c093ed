import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { gaussLegendre } from './gaussLegendre.ts';
import { solveLinear } from './solveLinear.ts';

const NODES = 100;
const density = (x: number): number => Math.exp(-0.5 * x * x) / Math.sqrt(2 * Math.PI);

/**
 * Average run length of a one-sided CUSUM of independent normal values: S = max(0, S + z - reference), a flag when S exceeds the limit.
 * @param reference  k, in sigmas of one value
 * @param limit      h, in sigmas of one value, > 0
 * @param shift      true mean in sigmas, towards the side the sum looks at
 * @param start      where the sum starts, in [0, limit): a head start when above 0
 * Method: the integral equation of the run length with its atom at zero, at the nodes of a Gauss-Legendre rule.
 * Source: Brook D and Evans DA, Biometrika 59:539-548, 1972 (the chain this equation is the limit of; read in a secondary source).
 * Example: reference 0.5, limit 4: 335.37 with nothing changed.
 */
export function cusumRunLength(reference: number, limit: number, shift = 0, start = 0): number {
  const { nodes, weights } = gaussLegendre(NODES, 0, limit);
  const size = NODES + 1;
  const drift = shift - reference;
  const stays = (from: number): number => normalCdf(-from - drift, 0, 1);
  const kernel = (from: number, to: number): number => density(to - from - drift);
  // Unknowns: the run length from zero, then from every node.
  const matrix = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    const from = i === 0 ? 0 : nodes[i - 1]!;
    for (let j = 0; j < size; j++) {
      const chance = j === 0 ? stays(from) : weights[j - 1]! * kernel(from, nodes[j - 1]!);
      matrix[i * size + j] = (i === j ? 1 : 0) - chance;
    }
  }
  const length = solveLinear(matrix, new Float64Array(size).fill(1));
  let mean = 1 + stays(start) * length[0]!;
  for (let j = 0; j < NODES; j++) mean += weights[j]! * kernel(start, nodes[j]!) * length[j + 1]!;
  return mean;
}

/**
 * Average run length of two such sums side by side, looking up and down with the same reference and limit.
 * Method: 1 / both = 1 / up + 1 / down, exact as one sum is at zero whenever the other flags.
 * Source: Kemp KW, JRSS B 23:149-153, 1961 (reference from memory). Example: reference 0.5, limit 5: 465.4, and 10.38 at one sigma.
 */
export function twoSidedCusumRunLength(reference: number, limit: number, shift = 0): number {
  return 1 / (1 / cusumRunLength(reference, limit, shift) + 1 / cusumRunLength(reference, limit, -shift));
}

/** The limit that gives a one-sided sum this average run length with nothing changed, by bisection. */
export function cusumLimitFor(reference: number, runLength: number): number {
  let low = 0;
  let high = 1;
  while (cusumRunLength(reference, high) < runLength) [low, high] = [high, 2 * high];
  while (high - low > 1e-7 * high) {
    const middle = (low + high) / 2;
    if (cusumRunLength(reference, middle) < runLength) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
