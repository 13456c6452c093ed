import { type Adjusted, ascending, decided } from './types.ts';

/**
 * Holm: the chance of even one false finding is at most `level`, whatever the dependence of the tests.
 * @param p      p values in [0, 1], any order
 * @param level  e.g. 0.05
 * Source: Holm S, Scandinavian Journal of Statistics 6:65-70, 1979 (pages from memory). Example: 0.01, 0.04, 0.03, 0.005 become
 * 0.03, 0.06, 0.06, 0.02.
 */
export function holm(p: readonly number[], level: number): Adjusted {
  const adjusted = new Array<number>(p.length);
  let most = 0;
  for (const [before, at] of ascending(p).entries()) {
    most = Math.max(most, Math.min(1, (p.length - before) * p[at]!));
    adjusted[at] = most;
  }
  return decided(adjusted, level);
}

/** Bonferroni: Holm's promise in one step, every p value times their number. */
export function bonferroni(p: readonly number[], level: number): Adjusted {
  return decided(
    p.map((value) => Math.min(1, p.length * value)),
    level,
  );
}
