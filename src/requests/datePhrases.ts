import type { Day } from '../days.ts';
import { dateAt } from './dates.ts';
import type { Token } from './tokens.ts';

export interface DatePhrase {
  /** null when the words read as two dates */
  readonly day: Day | null;
  readonly from: number;
  readonly to: number;
}

const COMPLETE = new Set(['data', 'export', 'file', 'complete', 'is', 'are', 'was', 'the']);

/** "as of 30 June 2025", "data through June 2025", "complete to 2025-06-30". */
export function asOfPhrase(tokens: readonly Token[], reference: Day): DatePhrase | undefined {
  for (let i = 0; i < tokens.length; i++) {
    if (word(tokens, i) === 'as' && ['of', 'at'].includes(word(tokens, i + 1))) {
      const date = dateAt(tokens, i + 2, reference, 'last');
      if (date) return { day: date.day, from: i, to: date.to };
    }
    if (!['data', 'export', 'file', 'complete'].includes(word(tokens, i))) continue;
    let at = i + 1;
    while (COMPLETE.has(word(tokens, at))) at++;
    if (word(tokens, at) === 'up' && word(tokens, at + 1) === 'to') at++;
    if (!['through', 'thru', 'until', 'till', 'to'].includes(word(tokens, at))) continue;
    const date = dateAt(tokens, at + 1, reference, 'last');
    if (date) return { day: date.day, from: i, to: date.to };
  }
  return undefined;
}

const SINCE = new Set(['since', 'from', 'after', 'starting', 'started', 'beginning', 'joined', 'joining']);

/** "since March", "from 1 March 2025", "started in March", "accounts starting 2025-03-01". */
export function sincePhrase(tokens: readonly Token[], reference: Day): DatePhrase | undefined {
  for (let i = 0; i < tokens.length; i++) {
    if (!SINCE.has(word(tokens, i))) continue;
    let at = i + 1;
    while (SINCE.has(word(tokens, at))) at++;
    const date = dateAt(tokens, at, reference, 'first');
    if (date) return { day: date.day, from: i, to: date.to };
  }
  return undefined;
}

function word(tokens: readonly Token[], i: number): string {
  const token = tokens[i];
  return token && !token.used && token.segment === undefined ? token.text : '';
}
