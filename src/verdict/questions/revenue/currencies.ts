/** Accounts by the currency of their amounts; null: none stated. */
export interface CurrencyCount {
  readonly currency: string | null;
  readonly accounts: number;
}

/** A dollar sign alone is taken for the one dollar that is named beside it. */
const DOLLARS = ['USD', 'AUD', 'CAD', 'NZD', 'HKD', 'SGD'];

/**
 * The one currency of these accounts, or that there are several: sums over several mean nothing.
 * @returns `currency` null when none is stated at all
 */
export function oneCurrency(
  counts: readonly CurrencyCount[],
): { readonly kind: 'one'; readonly currency: string | null } | { readonly kind: 'several' } {
  const stated = counts.flatMap(({ currency }) => (currency === null ? [] : [currency]));
  if (stated.length <= 1) return { kind: 'one', currency: stated[0] ?? null };
  const named = stated.filter((currency) => currency !== '$');
  const [only] = named;
  return stated.length === 2 && named.length === 1 && only !== undefined && DOLLARS.includes(only)
    ? { kind: 'one', currency: only }
    : { kind: 'several' };
}
