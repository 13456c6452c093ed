/** x ln x, continued to 0 at 0. */
function xLogX(x: number): number {
  return x > 0 ? x * Math.log(x) : 0;
}

/** Binomial log likelihood of `lost` in `accounts` at its maximum, rate lost / accounts, without the constant; 0 for no accounts. */
export function maxLogLikelihood(lost: number, accounts: number): number {
  return xLogX(lost) + xLogX(accounts - lost) - xLogX(accounts);
}
