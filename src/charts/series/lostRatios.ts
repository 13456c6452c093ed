import { individualsLimits } from '../kinds/individualsChart.ts';
import type { SeriesFamily } from './family.ts';
import { normalIndividuals } from './normal.ts';

/**
 * Lost shares of revenue as the individuals chart draws them: the same centre line and the very sigma of its limits (2.66 MRbar / 3), so
 * that what is judged and what is drawn can never differ in the last digit.
 * @param shape  from lostRatioShape: how the shares really scatter, which every simulated history is drawn from; normal when null.
 *               Likelihoods stay those of the normal distribution: they order the evidence, and the threshold is calibrated for the shape.
 */
export function lostRatios(shape: Float64Array | null = null): SeriesFamily {
  const normal = normalIndividuals('more-churn');
  const own: Pick<SeriesFamily, 'sampler'> =
    shape === null
      ? { sampler: normal.sampler }
      : {
          sampler:
            ({ mean, sigma }) =>
            (uniform) =>
              mean + sigma * shape[Math.floor(uniform() * shape.length)]!,
        };
  return {
    ...normal,
    ...own,
    fit(values) {
      if (values.length < 2) return null;
      const { center, sigma } = individualsLimits(Array.from(values));
      return sigma > 0 ? { mean: center, sigma } : null;
    },
  };
}
