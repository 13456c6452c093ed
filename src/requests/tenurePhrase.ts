import type { Tenure } from '../census/types.ts';
import { numberOf } from './numbers.ts';
import type { Token } from './tokens.ts';

const UNITS: Readonly<Record<string, readonly [Tenure['unit'], number]>> = {
  day: ['day', 1],
  days: ['day', 1],
  d: ['day', 1],
  week: ['week', 1],
  weeks: ['week', 1],
  wk: ['week', 1],
  wks: ['week', 1],
  w: ['week', 1],
  month: ['month', 1],
  months: ['month', 1],
  mo: ['month', 1],
  mos: ['month', 1],
  mth: ['month', 1],
  mths: ['month', 1],
  m: ['month', 1],
  quarter: ['month', 3],
  quarters: ['month', 3],
  year: ['month', 12],
  years: ['month', 12],
  yr: ['month', 12],
  yrs: ['month', 12],
  y: ['month', 12],
};

/** Before a length of time these words turn it into a stretch of the calendar, which is no age. */
const WINDOW = new Set(['last', 'past', 'previous', 'recent', 'this', 'next', 'coming', 'every', 'each']);
const ORDINAL = new Set(['st', 'nd', 'rd', 'th']);
const SHORT = new Set(['d', 'w', 'm', 'y']);
/** Longest age that is read, in the unit's own count. */
const LONGEST = { day: 36_525, week: 5_218, month: 1_200 } as const;

export interface TenureFound {
  readonly tenure: Tenure;
  readonly from: number;
  readonly to: number;
}

/** The first age named in the unused tokens: "at 6 months", "90 days", "half a year", "a quarter", "month 3". */
export function tenurePhrase(tokens: readonly Token[]): TenureFound | undefined {
  for (let i = 0; i < tokens.length; i++) {
    const found = at(tokens, i);
    if (!found || isWindow(tokens, i) || tokens[found.to]?.text === 'ago') continue;
    return found;
  }
  return undefined;
}

function at(tokens: readonly Token[], i: number): TenureFound | undefined {
  const token = tokens[i];
  if (!token || token.used || token.segment !== undefined) return undefined;
  if (token.text === 'half') {
    const article = tokens[i + 1]?.text === 'a' || tokens[i + 1]?.text === 'an' ? 1 : 0;
    const unit = tokens[i + 1 + article]?.text;
    if (unit === 'year' || unit === 'yr') return { tenure: { count: 6, unit: 'month' }, from: i, to: i + 2 + article };
    return undefined;
  }
  const count = numberOf(token) ?? (token.text === 'a' || token.text === 'an' ? 1 : undefined);
  if (count !== undefined) {
    // "a half year"
    if (tokens[i + 1]?.text === 'half') return undefined;
    // "after the 3rd month"
    const ordinal = ORDINAL.has(tokens[i + 1]?.text ?? '') ? 1 : 0;
    return scaled(tokens, i, i + 1 + ordinal, count, token);
  }
  // "by month 3", "at day 90": the unit first, when a preposition makes it an age
  const before = tokens[i - 1]?.text;
  const after = numberOf(tokens[i + 1]);
  if (UNITS[token.text] && after !== undefined && (before === 'by' || before === 'at' || before === 'to')) {
    const built = tenure(UNITS[token.text]!, after);
    return built && { tenure: built, from: i, to: i + 2 };
  }
  // "m3", "d90": a lone letter that touches its number
  if (SHORT.has(token.text) && after !== undefined && tokens[i + 1]?.from === token.to) {
    const built = tenure(UNITS[token.text]!, after);
    return built && { tenure: built, from: i, to: i + 2 };
  }
  if (before === 'at' && (token.text === 'year' || token.text === 'quarter')) {
    return { tenure: tenure(UNITS[token.text]!, 1)!, from: i, to: i + 1 };
  }
  return undefined;
}

function scaled(
  tokens: readonly Token[],
  from: number,
  unitAt: number,
  count: number,
  number: Token,
): TenureFound | undefined {
  const unitToken = tokens[unitAt];
  const unit = unitToken && !unitToken.used ? UNITS[unitToken.text] : undefined;
  if (!unit || !unitToken) return undefined;
  // A lone letter is a unit only where it touches its number: "90d".
  if (SHORT.has(unitToken.text) && unitToken.from !== number.to) return undefined;
  const built = tenure(unit, count);
  return built && { tenure: built, from, to: unitAt + 1 };
}

function tenure([unit, times]: readonly [Tenure['unit'], number], count: number): Tenure | undefined {
  const whole = count * times;
  if (!Number.isInteger(whole) || whole < 1 || whole > LONGEST[unit]) return undefined;
  return { count: whole, unit };
}

function isWindow(tokens: readonly Token[], i: number): boolean {
  const before = tokens[i - 1];
  return before !== undefined && WINDOW.has(before.text);
}
