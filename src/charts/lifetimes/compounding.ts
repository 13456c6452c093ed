/**
 * The share lost over several periods when each loses the same share of those left: 1 - (1 - p)^periods.
 * With a fraction of a period as `periods` it goes the other way: 1/12 turns a yearly loss into the monthly one that compounds to it.
 * @param loss     share lost per period, in [0, 1]
 * @param periods  > 0
 * Example: 3 % a month is 30.6 % a year, not 36 %.
 */
export function compounded(loss: number, periods: number): number {
  return loss === 1 ? 1 : -Math.expm1(periods * Math.log1p(-loss));
}
