import type { CensusView } from '../census/types.ts';
import type { ChartKind } from '../charts/types.ts';
import { numberOf } from './numbers.ts';
import type { Token } from './tokens.ts';

/** "by calendar month", "per month", "by renewal date": how accounts are ordered and cut. Its words are used up. */
export function viewPhrase(list: Token[]): CensusView | undefined {
  const word = (i: number): string => (list[i] && !list[i].used && list[i].segment === undefined ? list[i].text : '');
  for (let i = 0; i < list.length; i++) {
    if (['by', 'per', 'each', 'every'].includes(word(i)) || ['by', 'per'].includes(list[i]!.text)) {
      const calendar = word(i + 1) === 'calendar' ? 1 : 0;
      const noun = word(i + 1 + calendar);
      // "by month 3" is an age.
      if (/^months?$/.test(noun) && numberOf(list[i + 2 + calendar]) === undefined) {
        consume(list, i, i + 2 + calendar);
        return 'calendar';
      }
      if (/^(renewal|renewals|renewing)$/.test(noun)) {
        consume(list, i, i + 2 + (['date', 'dates', 'day'].includes(word(i + 2)) ? 1 : 0));
        return 'renewal';
      }
    }
    if (word(i) === 'calendar') {
      consume(list, i, i + 1 + (/^(view|months?|chart)$/.test(word(i + 1)) ? 1 : 0));
      return 'calendar';
    }
    if (word(i) === 'renewal' && ['view', 'churn', 'rate', 'chart'].includes(word(i + 1))) {
      consume(list, i, i + (word(i + 1) === 'churn' ? 1 : 2));
      return 'renewal';
    }
    if (word(i) === 'monthly' && ['churn', 'rate', 'view', 'figures', 'numbers'].includes(word(i + 1))) {
      consume(list, i, i + 1);
      return 'calendar';
    }
  }
  return undefined;
}

/** Chart kinds by the words people use; longest first. */
const NAMES: readonly (readonly [readonly string[], ChartKind])[] = [
  [['p', 'prime'], 'p-prime'],
  [["laney's", 'p'], 'p-prime'],
  [['laney'], 'p-prime'],
  [['p'], 'p'],
  [['g'], 'g'],
  [['t'], 't'],
  [['individuals'], 'individuals'],
  [['xmr'], 'individuals'],
  [['ewma'], 'ewma'],
  [['smoothed'], 'ewma'],
  [['cusum'], 'cusum'],
  [['account', 'by', 'account'], 'cusum'],
];

/** "with a g chart", "as an EWMA chart", "p prime chart": the kind of chart insisted on. Its words are used up. */
export function chartPhrase(list: Token[]): ChartKind | undefined {
  for (let i = 0; i < list.length; i++) {
    for (const [words, kind] of NAMES) {
      if (!words.every((wanted, k) => list[i + k]?.text === wanted && list[i + k]?.segment === undefined)) continue;
      const to = i + words.length;
      const charted = list[to]?.text === 'chart';
      if (!charted && !['ewma', 'cusum', 'account', 'xmr', 'laney'].includes(words[0]!)) continue;
      let from = i;
      while (from > 0 && ['a', 'an', 'the', 'with', 'as', 'on', 'in', 'using'].includes(list[from - 1]!.text)) from--;
      consume(list, from, charted ? to + 1 : to);
      return kind;
    }
  }
  return undefined;
}

const WORDS: Readonly<Record<ChartKind, string>> = {
  p: 'a p chart',
  'p-prime': 'a p prime chart',
  g: 'a g chart',
  t: 'a t chart',
  individuals: 'an individuals chart',
  ewma: 'an EWMA chart',
  cusum: 'a CUSUM chart',
};

/** The words that are understood as this kind. */
export function chartInWords(kind: ChartKind): string {
  return WORDS[kind];
}

function consume(list: readonly Token[], from: number, to: number): void {
  for (const token of list.slice(from, to)) token.used = true;
}
