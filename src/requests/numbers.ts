import type { Token } from './tokens.ts';

const WORDS: Readonly<Record<string, number>> = {
  one: 1,
  two: 2,
  three: 3,
  four: 4,
  five: 5,
  six: 6,
  seven: 7,
  eight: 8,
  nine: 9,
  ten: 10,
  eleven: 11,
  twelve: 12,
  thirteen: 13,
  fourteen: 14,
  fifteen: 15,
  eighteen: 18,
  twenty: 20,
  thirty: 30,
  forty: 40,
  fifty: 50,
  sixty: 60,
  ninety: 90,
  hundred: 100,
};

/** The number a token stands for ("120", "1,200", "six"), or undefined. */
export function numberOf(token: Token | undefined): number | undefined {
  if (!token || token.used || token.segment !== undefined) return undefined;
  const word = WORDS[token.text];
  if (word !== undefined) return word;
  if (!/^\d[\d,]*(\.\d+)?$/.test(token.text)) return undefined;
  const value = Number(token.text.replaceAll(',', ''));
  return Number.isFinite(value) ? value : undefined;
}
