import { headerWords } from './headerWords.ts';

/** How long an amount pays for, by the name of its column. */
export interface AmountPeriod {
  readonly months: number;
  /** false when the name says nothing, and a month is taken */
  readonly stated: boolean;
}

const PERIODS: readonly { readonly months: number; readonly words: readonly string[] }[] = [
  {
    months: 12,
    words: ['year', 'yearly', 'annual', 'annually', 'annum', 'arr', 'acv', 'jahr', 'jahrlich', 'anual', 'annuel'],
  },
  { months: 3, words: ['quarter', 'quarterly', 'quartal'] },
  { months: 1, words: ['month', 'monthly', 'mrr', 'monat', 'monatlich', 'mensual', 'mensuel'] },
  { months: 12 / 52.1775, words: ['week', 'weekly', 'woche', 'wochentlich'] },
];

/** "annual_price" is twelve months, "MRR" one; "amount" says nothing and is taken as a month. */
export function amountPeriod(header: string): AmountPeriod {
  const words = headerWords(header);
  const found = PERIODS.find((period) => period.words.some((word) => words.includes(word)));
  return { months: found?.months ?? 1, stated: found !== undefined };
}
