/** An exponentially weighted moving average and how far chance alone spreads it. */
export interface Smoothed {
  readonly value: number;
  readonly sigma: number;
}

/**
 * Takes values one at a time into an exponentially weighted moving average that starts at the center.
 * @param lambda  weight of the newest value, in (0, 1]
 * @param center  where it starts, in the values' unit
 * @returns       a function of (value, sigma of that value) that gives the average and its own sigma
 * Method: z_i = lambda x_i + (1 - lambda) z_(i-1), and var z_i = lambda^2 var x_i + (1 - lambda)^2 var z_(i-1): for equal sigmas
 * sigma^2 lambda / (2 - lambda) (1 - (1 - lambda)^(2i)), the limits of a young chart, which widen with its age. Assumes independent values.
 * Source: Roberts SW, Technometrics 1:239-250, 1959 (reference from memory); Lucas JM and Saccucci MS, Technometrics 32:1-12, 1990.
 */
export function smoother(lambda: number, center: number): (value: number, sigma: number) => Smoothed {
  const kept = 1 - lambda;
  let level = center;
  let variance = 0;
  return (value, sigma) => {
    level = lambda * value + kept * level;
    variance = lambda * lambda * sigma * sigma + kept * kept * variance;
    return { value: level, sigma: Math.sqrt(variance) };
  };
}
