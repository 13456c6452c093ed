import { individualsLimits } from '../kinds/individualsChart.ts';
import type { SeriesFamily } from './family.ts';
import { normalIndividuals } from './normal.ts';

const normal = normalIndividuals('more-churn');

/**
 * Lost shares of revenue as the individuals chart draws them: the same centre line and the very sigma of its limits (2.66 MRbar / 3), so
 * that what is judged and what is drawn can never differ in the last digit.
 */
export const lostRatios: SeriesFamily = {
  ...normal,
  fit(values) {
    if (values.length < 2) return null;
    const { center, sigma } = individualsLimits(Array.from(values));
    return sigma > 0 ? { mean: center, sigma } : null;
  },
};
