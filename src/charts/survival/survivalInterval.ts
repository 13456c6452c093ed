import { Z_95 } from '../intervals/wilson.ts';
import type { SurvivalStep } from './kaplanMeier.ts';

/** The scale on which the interval is symmetric: S itself, log S, or log(-log S). */
export type SurvivalScale = 'plain' | 'log' | 'log-log';

/**
 * Pointwise interval for one step of a Kaplan-Meier curve, clipped to [0, 1].
 * @returns null once nobody is left: the curve then says nothing of its own error
 * Method: S -/+ z se; S exp(-/+ z se/S); S^exp(-/+ z se/(S log S)). The log-log one never leaves [0, 1] and is the one to show.
 * Source: Kalbfleisch JD and Prentice RL, The Statistical Analysis of Failure Time Data, 1980, section 1.3 (log-log; section from memory).
 * Example: 6-MP, week 6: 0.7075 to 1 plain, 0.7198 to 1 log, 0.6197 to 0.9516 log-log.
 */
export function survivalInterval(
  step: SurvivalStep,
  scale: SurvivalScale = 'log-log',
  z = Z_95,
): { readonly low: number; readonly high: number } | null {
  const { survival, standardError } = step;
  if (standardError === null) return null;
  // Nobody lost yet: no error to speak of.
  if (survival === 1) return { low: 1, high: 1 };
  if (scale === 'log-log') {
    const reach = (z * standardError) / (survival * Math.abs(Math.log(survival)));
    return { low: survival ** Math.exp(reach), high: survival ** Math.exp(-reach) };
  }
  const [low, high] =
    scale === 'plain'
      ? [survival - z * standardError, survival + z * standardError]
      : [survival * Math.exp((-z * standardError) / survival), survival * Math.exp((z * standardError) / survival)];
  return { low: Math.max(0, low), high: Math.min(1, high) };
}
