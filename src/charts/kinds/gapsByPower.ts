import type { ZoneEdges } from '../tests/zoneEdges.ts';

/** Exponential times through this power scatter about normally. Often written 0.2777. */
export const NELSON_POWER = 1 / 3.6;

/** The gaps on the scale on which they scatter about normally. */
export function toPower(gaps: readonly number[], power = NELSON_POWER): number[] {
  return gaps.map((gap) => gap ** power);
}

/** Back from that scale; what lies below zero there is 0. */
export function fromPower(transformed: number, power = NELSON_POWER): number {
  return Math.max(0, transformed) ** (1 / power);
}

/**
 * Centre line and zones on the power scale, read back as gaps. With the level of an individuals chart on gap^(1/3.6) they come from the
 * spread the gaps really have: for gaps that clearly scatter more than the exponential or geometric distribution allows, as Laney's chart
 * is for counts.
 * Source: Nelson LS, A control chart for parts-per-million nonconforming items, Journal of Quality Technology 26(3):239-240, 1994 (formula
 * seen in a secondary source).
 */
export function backToGaps({ center, above, below }: ZoneEdges, power = NELSON_POWER): ZoneEdges {
  const back = (value: number): number => fromPower(value, power);
  return {
    center: back(center),
    above: [back(above[0]), back(above[1]), back(above[2])],
    below: [back(below[0]), back(below[1]), back(below[2])],
  };
}
