import { numberOf } from './numbers.ts';
import type { Token } from './tokens.ts';

const UP = new Set('rise rises rising increase up grow growth higher jump'.split(' '));
const DOWN = new Set('fall falls falling drop decrease down cut reduction lower'.split(' '));
const FRACTIONS: Readonly<Record<string, number>> = { half: 0.5, third: 1 / 3, quarter: 0.25, fifth: 0.2, tenth: 0.1 };

/**
 * The size of a move, as a factor on the rate: "a halving" 0.5, "doubling" 2, "a rise by 30 %" 1.3, "a fall by a quarter" 0.75.
 * Its words are used up. Undefined when none is named, or it would leave nothing to lose.
 */
export function movePhrase(sentence: string, list: Token[]): number | undefined {
  for (const [i, token] of list.entries()) {
    if (token.used || token.segment !== undefined) continue;
    const whole = WHOLE[token.text];
    if (whole !== undefined) {
      consume(list, i, i + 1);
      return whole;
    }
    const sign = UP.has(token.text) ? 1 : DOWN.has(token.text) ? -1 : 0;
    if (sign === 0) continue;
    let at = i + 1;
    while (['by', 'of', 'a', 'an', 'in'].includes(list[at]?.text ?? '')) at++;
    const named = FRACTIONS[list[at]?.text ?? ''];
    const number = numberOf(list[at]);
    const size = named ?? (number === undefined ? undefined : number / 100);
    if (size === undefined || !(size > 0) || (sign < 0 && size >= 1)) continue;
    const percent = named === undefined && /^(percent|pct)$/.test(list[at + 1]?.text ?? '') ? 1 : 0;
    if (named === undefined && percent === 0 && !sentence.slice(list[at]!.to).trimStart().startsWith('%')) continue;
    consume(list, i, at + 1 + percent);
    return Number((1 + sign * size).toPrecision(12));
  }
  return undefined;
}

const MOVES = new Set([...UP, ...DOWN, 'move', 'change']);

/** "a rise to 9 %": the rate it leads to, a fraction. Its words are used up. */
export function movedTo(sentence: string, list: Token[]): number | undefined {
  for (const [i, token] of list.entries()) {
    if (token.used || token.segment !== undefined || !MOVES.has(token.text) || list[i + 1]?.text !== 'to') continue;
    const value = numberOf(list[i + 2]);
    if (value === undefined || !(value > 0 && value < 100)) continue;
    const named = /^(percent|pct)$/.test(list[i + 3]?.text ?? '') ? 1 : 0;
    if (
      named === 0 &&
      !sentence
        .slice(list[i + 2]!.to)
        .trimStart()
        .startsWith('%')
    )
      continue;
    consume(list, i, i + 3 + named);
    return Number((value / 100).toPrecision(12));
  }
  return undefined;
}

const WHOLE: Readonly<Record<string, number>> = { halving: 0.5, halved: 0.5, doubling: 2, doubled: 2, tripling: 3 };

/** A factor in words that are understood again: 1.3 is "a rise by 30 %". */
export function moveInWords(move: number): string {
  const percent = Number((Math.abs(move - 1) * 100).toPrecision(10));
  return `a ${move > 1 ? 'rise' : 'fall'} by ${percent} %`;
}

/** "within 6 points": its number; its words are used up. */
export function withinPhrase(list: Token[]): number | undefined {
  for (const [i, token] of list.entries()) {
    if (token.used || !['within', 'in', 'after'].includes(token.text)) continue;
    const value = numberOf(list[i + 1]);
    if (value === undefined || !Number.isInteger(value) || value < 1 || value > 1000) continue;
    if (!/^points?$/.test(list[i + 2]?.text ?? '')) continue;
    consume(list, i, i + 3);
    return value;
  }
  return undefined;
}

function consume(list: readonly Token[], from: number, to: number): void {
  for (let i = from; i < to; i++) list[i]!.used = true;
}
