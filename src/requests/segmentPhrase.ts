import { withinOneSlip } from './editDistance.ts';
import { ASKING, NOISE, SEGMENT_WORDS } from './noise.ts';
import type { Token } from './tokens.ts';

export interface SegmentFound {
  readonly value: string;
  readonly from: number;
  readonly to: number;
}

/** Words for one length of contract that people swap freely. */
const SAME: readonly (readonly string[])[] = [
  ['annual', 'annually', 'yearly'],
  ['monthly', 'month to month'],
];

const plain = (text: string): string =>
  text
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, ' ')
    .trim();

/**
 * A segment value named in the unused tokens.
 * @param how 'marked': equal to a value and beside a word such as "plan", which settles it even where the value reads as something else;
 *            'any': equal, in the plural, with one slip in a longer word, by a synonym, or by a word that only one value holds
 */
export function segmentPhrase(
  tokens: readonly Token[],
  segments: readonly string[],
  column: string | undefined,
  how: 'marked' | 'any',
): SegmentFound | undefined {
  const values = segments.map((value) => ({ value, plain: plain(value), words: plain(value).split(' ').length }));
  const marks = new Set([...SEGMENT_WORDS, ...(column === undefined ? [] : plain(column).split(' '))]);
  const longest = Math.max(0, ...values.map((entry) => entry.words));
  for (const match of how === 'marked' ? [equal] : [equal, synonym, plural, slip]) {
    for (let length = Math.min(longest + 1, tokens.length); length >= 1; length--) {
      for (let i = 0; i + length <= tokens.length; i++) {
        const slice = tokens.slice(i, i + length);
        if (slice.some((token) => token.used || token.segment !== undefined)) continue;
        const text = plain(slice.map((token) => token.text).join(' '));
        const marked = marks.has(tokens[i + length]?.text ?? '') || marks.has(tokens[i - 1]?.text ?? '');
        if (how === 'marked' && !marked) continue;
        // An everyday word is a segment only where a word such as "plan" says so.
        if (!marked && slice.every((token) => NOISE.has(token.text) || ASKING.has(token.text))) continue;
        const hit = values.find((entry) => entry.plain !== '' && match(text, entry.plain));
        if (hit) return { value: hit.value, from: i, to: i + length };
      }
    }
  }
  return how === 'any' ? byOneWord(tokens, values) : undefined;
}

const equal = (text: string, value: string): boolean => text === value;
const synonym = (text: string, value: string): boolean =>
  SAME.some((group) => group.includes(text) && group.includes(value));
const plural = (text: string, value: string): boolean =>
  [`${value}s`, `${value}es`].includes(text) || [`${text}s`, `${text}es`].includes(value);
const slip = (text: string, value: string): boolean =>
  value.length >= 5 && (withinOneSlip(text, value) || withinOneSlip(text, `${value}s`));

/** "annual" for the value "Annual (prepaid)", when no other value holds the word. */
function byOneWord(
  tokens: readonly Token[],
  values: readonly { value: string; plain: string }[],
): SegmentFound | undefined {
  for (const [i, token] of tokens.entries()) {
    if (token.used || token.text.length < 4 || NOISE.has(token.text) || ASKING.has(token.text)) continue;
    const hits = values.filter((entry) => entry.plain.split(' ').includes(plain(token.text)));
    if (hits.length === 1) return { value: hits[0]!.value, from: i, to: i + 1 };
  }
  return undefined;
}
