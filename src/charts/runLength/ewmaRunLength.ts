import { gaussLegendre } from './gaussLegendre.ts';
import { solveLinear } from './solveLinear.ts';

const NODES = 120;
const density = (x: number): number => Math.exp(-0.5 * x * x) / Math.sqrt(2 * Math.PI);

/**
 * Average run length of an EWMA of independent normal values with known mean and sigma, two-sided, with the limits an old chart has:
 * center -/+ width sigma sqrt(lambda / (2 - lambda)), and the smoothed value at the center to begin with.
 * @param lambda  weight of the newest value, in (0, 1]
 * @param width   L, in sigmas of the smoothed value, > 0
 * @param shift   how far the true mean lies from the center, in sigmas of one value
 * Method: the integral equation of the run length, solved at the nodes of a Gauss-Legendre rule (Nystroem). With a smaller lambda than
 * about 0.01 the rule becomes too coarse.
 * Source: Crowder SV, Technometrics 29:401-407, 1987 (reference from memory); tables: Lucas JM and Saccucci MS, Technometrics 32:1-12, 1990.
 * Example: lambda 0.1, width 2.814: 499.6 with nothing changed, 10.33 at a shift of one sigma.
 */
export function ewmaRunLength(lambda: number, width: number, shift = 0): number {
  const limit = width * Math.sqrt(lambda / (2 - lambda));
  const { nodes, weights } = gaussLegendre(NODES, -limit, limit);
  const kernel = (from: number, to: number): number => density((to - (1 - lambda) * from) / lambda - shift) / lambda;
  const matrix = new Float64Array(NODES * NODES);
  for (let i = 0; i < NODES; i++) {
    for (let j = 0; j < NODES; j++) {
      matrix[i * NODES + j] = (i === j ? 1 : 0) - weights[j]! * kernel(nodes[i]!, nodes[j]!);
    }
  }
  const length = solveLinear(matrix, new Float64Array(NODES).fill(1));
  return length.reduce((sum, value, j) => sum + weights[j]! * kernel(0, nodes[j]!) * value, 1);
}
