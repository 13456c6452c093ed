import { sameByArithmetic } from './zone.ts';

/** Chances of a value beyond 1, 2 and 3 sigma on one side of a normal distribution: 1 - Phi(1), 1 - Phi(2), 1 - Phi(3). */
export const TAIL_AREAS = [0.15865525393145707, 0.022750131948179195, 0.0013498980316300933] as const;

/**
 * Where the zones of a chart end when they come from tail areas and not from multiples of sigma: skewed values have edges that lie
 * further from the centre line on one side than on the other. A value beyond an edge is strictly beyond it.
 */
export interface ZoneEdges {
  /** the centre line */
  readonly center: number;
  /** values above these are beyond 1, 2, 3 sigma */
  readonly above: readonly [number, number, number];
  /** values below these are beyond 1, 2, 3 sigma; with a smallest possible value as its edge, a side cannot be left */
  readonly below: readonly [number, number, number];
}

/** Edges at -/+ 1, 2, 3 sigma of a centre line. */
export function symmetricEdges(center: number, sigma: number): ZoneEdges {
  return {
    center,
    above: [center + sigma, center + 2 * sigma, center + 3 * sigma],
    below: [center - sigma, center - 2 * sigma, center - 3 * sigma],
  };
}

/** Signed zone of a value between edges; the same numbers as zoneOf. */
export function zoneBetween(value: number, { center, above, below }: ZoneEdges): number {
  if (sameByArithmetic(value, center)) return 0;
  if (value > center) return zoneBeyond(value, above, 1);
  return -zoneBeyond(value, below, -1);
}

function zoneBeyond(value: number, edges: readonly [number, number, number], side: 1 | -1): number {
  for (let j = 2; j >= 0; j--) {
    const edge = edges[j]!;
    if (side * (value - edge) > 0 && !sameByArithmetic(value, edge)) return j + 2;
  }
  return 1;
}
