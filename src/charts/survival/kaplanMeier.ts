import type { RiskSet } from './types.ts';

/** One step of the curve: the share still there from `time` on, until the next step. */
export interface SurvivalStep extends RiskSet {
  readonly survival: number;
  /** Greenwood's standard error; null once nobody is left, when it says nothing */
  readonly standardError: number | null;
}

/**
 * Kaplan-Meier curve (product limit) with Greenwood's standard errors. Before the first step the survival is 1.
 * @param sets  in order of time; atRisk >= 1, 0 <= lost <= atRisk. Sets may come from nested observations (`riskSets`) or month by month.
 * Method: S(t) = product of (1 - lost/atRisk) over ages up to t; variance S(t)^2 times the sum of lost/(atRisk (atRisk - lost)).
 * Source: Kaplan EL and Meier P, JASA 53:457-481, 1958; Greenwood M, Reports on Public Health and Medical Subjects 33, 1926 (references from memory).
 * Example: remission of 21 patients under 6-MP (Freireich et al., Blood 21:699-716, 1963): 3 of 21 at week 6 give 0.857143 (0.076360).
 */
export function kaplanMeier(sets: readonly RiskSet[]): SurvivalStep[] {
  let survival = 1;
  let spread = 0;
  return sets.map(({ time, atRisk, lost }) => {
    survival *= 1 - lost / atRisk;
    spread += lost === atRisk ? 0 : lost / (atRisk * (atRisk - lost));
    return { time, atRisk, lost, survival, standardError: survival === 0 ? null : survival * Math.sqrt(spread) };
  });
}

/** The survival that holds at an age: that of the last step at or before it. */
export function survivalAt(steps: readonly SurvivalStep[], time: number): number {
  let survival = 1;
  for (const step of steps) {
    if (step.time > time) break;
    survival = step.survival;
  }
  return survival;
}
