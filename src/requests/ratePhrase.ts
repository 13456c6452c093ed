import { MOVING } from './noise.ts';
import type { Token } from './tokens.ts';

const RATE = new Set(['rate', 'rates', 'percentage', 'percent', 'level', 'figure', 'figures', 'number', 'numbers']);
const LOSS = new Set(
  'churn churned churning attrition retention lose losing lost loss losses leave leaving left quit cancel cancelled canceled cancellations'.split(
    ' ',
  ),
);

/**
 * "what is our churn rate", "how many customers did we lose", "churn percentage": a question for the rate itself, not for whether it
 * moved. A word that speaks of a move anywhere makes it the other question.
 * @returns the tokens from the asking word to the rate
 */
export function ratePhrase(tokens: readonly Token[]): { readonly from: number; readonly to: number } | undefined {
  const word = (i: number): string => (tokens[i] && !tokens[i].used ? tokens[i].text : '');
  if (tokens.some((_, i) => MOVING.has(word(i)))) return undefined;
  const opener = tokens.findIndex(
    (_, i) =>
      word(i) === "what's" ||
      (word(i) === 'what' && ['is', 'was', 'are', 'were'].includes(word(i + 1))) ||
      (word(i) === 'how' && ['much', 'many', 'high', 'low', 'big', 'large'].includes(word(i + 1))),
  );
  const rate = tokens.findIndex((_, i) => i > opener && RATE.has(word(i)));
  if (rate >= 0) {
    if (opener >= 0) return { from: opener, to: rate + 1 };
    return { from: LOSS.has(word(rate - 1)) ? rate - 1 : rate, to: rate + 1 };
  }
  const loss = opener < 0 ? -1 : tokens.findIndex((_, i) => i > opener && LOSS.has(word(i)));
  return loss < 0 ? undefined : { from: opener, to: loss + 1 };
}
