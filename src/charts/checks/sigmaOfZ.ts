/** Mean range of two standard normal values, d2(2) = 2 / sqrt(pi), as the tables print it. */
const D2_OF_2 = 1.128;

/** Standard deviation of standardised values from their mean moving range of span 2; 1 when there is none. */
export function sigmaOfZ(z: ArrayLike<number>): number {
  let ranges = 0;
  for (let i = 1; i < z.length; i++) ranges += Math.abs(z[i]! - z[i - 1]!);
  const sigma = z.length > 1 ? ranges / (z.length - 1) / D2_OF_2 : 0;
  return sigma > 0 ? sigma : 1;
}
