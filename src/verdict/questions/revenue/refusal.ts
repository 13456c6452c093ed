import type { Verdict } from '../../types.ts';
import { counted, listed } from '../../words/format.ts';
import type { CurrencyCount } from './currencies.ts';

/** Why no revenue can be added up. */
export type RevenueRefusal =
  | { readonly kind: 'no-column' }
  | { readonly kind: 'nothing-readable'; readonly column: string; readonly example: string | null }
  | { readonly kind: 'all-zero'; readonly column: string }
  | { readonly kind: 'all-negative'; readonly column: string }
  | {
      readonly kind: 'currencies';
      readonly currencies: readonly CurrencyCount[];
      readonly segmentColumn: string | null;
    };

const LOGO = 'Whether accounts leave more often does not hang on this: ask “has churn moved?”.';
const NAME_IT =
  'Name the column that holds what each account pays (“Correct this” in the channel, --columns amount=NAME on the command line), or export with it.';

/** "Cannot say", with the reason and what would mend it. */
export function refuseRevenue(refusal: RevenueRefusal, readCautions: readonly string[]): Verdict {
  const { reason, next } = words(refusal);
  return {
    outcome: 'cannot-say',
    headline: `Cannot say whether revenue churn has moved: ${reason}.`,
    evidence: evidence(refusal),
    cautions: [
      ...readCautions,
      'For pay, forecasts, investors or auditors, your company’s own written definitions and its finance and legal people decide.',
    ],
    next: [...next, LOGO],
    since: null,
    before: null,
    after: null,
    difference: null,
  };
}

function words(refusal: RevenueRefusal): { reason: string; next: string[] } {
  switch (refusal.kind) {
    case 'no-column':
      return { reason: 'no column of the export holds amounts', next: [NAME_IT] };
    case 'nothing-readable':
      return {
        reason: `no amount in column “${refusal.column}” can be read${refusal.example === null ? '' : `; it says “${refusal.example}”, for instance`}`,
        next: [NAME_IT],
      };
    case 'all-zero':
      return {
        reason: `every amount in column “${refusal.column}” is zero, so there is no revenue to lose`,
        next: [NAME_IT],
      };
    case 'all-negative':
      return {
        reason: `no amount in column “${refusal.column}” is above zero, and a negative one is no revenue`,
        next: [`If the signs are the wrong way round, turn them in the export. ${NAME_IT}`],
      };
    case 'currencies': {
      const group =
        refusal.segmentColumn === null
          ? 'Export the amounts in one currency'
          : `Ask about one group whose accounts all pay in one currency (“revenue for …”, by “${refusal.segmentColumn}”), or export the amounts in one currency`;
      return {
        reason: 'the amounts are in more than one currency, and their sum would mean nothing',
        next: [`${group}; Ebbline converts none, since a moving rate of exchange would pass for churn.`],
      };
    }
  }
}

function evidence(refusal: RevenueRefusal): string[] {
  if (refusal.kind !== 'currencies') return [];
  const each = refusal.currencies.map(
    ({ currency, accounts }) => `${currency ?? 'none stated'}: ${counted(accounts, 'account')}`,
  );
  return [`Currencies of the accounts that have had the time to leave or stay: ${listed(each)}.`];
}
