/** A figure as somebody gave it: 14.2 % stands for anything from 14.15 to 14.25 %. Fractions. */
export interface ReportedFigure {
  readonly rate: number;
  readonly low: number;
  readonly high: number;
}

/** Room for the arithmetic of fractions: far below any decimal somebody writes. */
const TINY = 1e-12;

/** @param decimals  of the percentage as it was given: 1 for "14.2 %" */
export function reportedFigure(rate: number, decimals: number): ReportedFigure {
  const half = 0.5 / 100 / 10 ** decimals;
  return { rate, low: rate - half, high: rate + half };
}

export interface Matched<T> {
  /** those that round to the figure, in the order given */
  readonly giving: readonly T[];
  /** all others, the nearest first; ties in the order given */
  readonly nearest: readonly T[];
  /**
   * how many would be expected to round to the figure by coincidence, from how thickly the others lie within a quarter of it; 0 for a figure
   * of 0. Our own rough reckoning, no source.
   */
  readonly byChance: number;
}

/** Which of several computed figures are the reported one, and which come nearest. */
export function matchFigures<T extends { readonly value: number }>(
  figures: readonly T[],
  reported: ReportedFigure,
): Matched<T> {
  const gives = ({ value }: T): boolean => value >= reported.low - TINY && value <= reported.high + TINY;
  const others = figures.filter((one) => !gives(one));
  const reach = reported.rate / 4;
  const around = others.filter(({ value }) => Math.abs(value - reported.rate) <= reach).length;
  const width = reported.high - reported.low;
  return {
    giving: figures.filter(gives),
    nearest: others.toSorted((a, b) => Math.abs(a.value - reported.rate) - Math.abs(b.value - reported.rate)),
    byChance: 2 * reach > width ? (around * width) / (2 * reach - width) : 0,
  };
}
