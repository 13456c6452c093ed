import { numberOf } from './numbers.ts';
import type { Token } from './tokens.ts';

export interface CountFound {
  readonly value: number;
  readonly from: number;
  readonly to: number;
}

const GROUPS = new Set(['subgroup', 'subgroups', 'group', 'groups', 'batch', 'batches', 'n']);
const BETWEEN = new Set([
  'size',
  'sizes',
  'sized',
  'of',
  'is',
  'at',
  'with',
  'from',
  'the',
  'first',
  'level',
  'for',
  'to',
  'an',
  'extra',
  'points',
]);
const COUNTED = new Set(['accounts', 'customers', 'subscribers', 'members', 'points', 'point', 'subgroups', 'each']);

/** "subgroups of 120", "subgroup size 120", "n = 120", "120 accounts per point". */
export function subgroupSizePhrase(tokens: readonly Token[]): CountFound | undefined {
  for (let i = 0; i < tokens.length; i++) {
    if (GROUPS.has(free(tokens, i))) {
      const found = numberAfter(tokens, i);
      if (found) return found;
    }
    const value = numberOf(tokens[i]);
    if (value === undefined) continue;
    const at = COUNTED.has(free(tokens, i + 1)) ? i + 2 : i + 1;
    const per = ['per', 'a', 'each', 'in'].includes(free(tokens, at));
    if (per && ['point', 'subgroup', 'group', 'batch'].includes(free(tokens, at + 1)))
      return { value, from: i, to: at + 2 };
  }
  return undefined;
}

/** "baseline 30", "a baseline of 30 points", "usual level from the first 30 points", "the first 30 points". */
export function baselinePhrase(tokens: readonly Token[]): CountFound | undefined {
  for (let i = 0; i < tokens.length; i++) {
    if (free(tokens, i) === 'baseline' || (free(tokens, i) === 'usual' && free(tokens, i + 1) === 'level')) {
      const found = numberAfter(tokens, i);
      if (found) return found;
    }
    const value = free(tokens, i) === 'first' ? numberOf(tokens[i + 1]) : undefined;
    if (value !== undefined && ['points', 'subgroups'].includes(free(tokens, i + 2)))
      return { value, from: i, to: i + 3 };
  }
  return undefined;
}

/** "allowing 14 days for late cancellations", "settle 14 days"; weeks count as seven days. */
export function settlePhrase(tokens: readonly Token[]): CountFound | undefined {
  for (let i = 0; i < tokens.length; i++) {
    if (!['settle', 'settling', 'allow', 'allowing'].includes(free(tokens, i))) continue;
    let at = i + 1;
    while (['for', 'of', 'a', 'another', 'days'].includes(free(tokens, at))) at++;
    const value = numberOf(tokens[at]);
    if (value === undefined) continue;
    const unit = free(tokens, at + 1);
    const times = unit === 'week' || unit === 'weeks' ? 7 : 1;
    let to = at + (times === 7 || unit === 'day' || unit === 'days' ? 2 : 1);
    while (['for', 'to', 'late', 'cancellations', 'cancellation', 'settle'].includes(free(tokens, to))) to++;
    return { value: value * times, from: i, to };
  }
  return undefined;
}

function free(tokens: readonly Token[], i: number): string {
  const token = tokens[i];
  return token && !token.used && token.segment === undefined ? token.text : '';
}

function numberAfter(tokens: readonly Token[], i: number): CountFound | undefined {
  let at = i + 1;
  while (at <= i + 5 && BETWEEN.has(free(tokens, at))) at++;
  const value = numberOf(tokens[at]);
  if (value === undefined) return undefined;
  return { value, from: i, to: COUNTED.has(free(tokens, at + 1)) ? at + 2 : at + 1 };
}
