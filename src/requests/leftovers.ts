import { nearestSegment, nearestTo } from './nearest.ts';
import { ASKING, LEADING, NOISE, SEGMENT_WORDS } from './noise.ts';
import type { Token } from './tokens.ts';
import type { RequestContext, Understanding } from './types.ts';

/** Words that are noise alone and mean something in front of a word that was not understood. */
const GLUE = new Set(['the', 'a', 'an', 'and', 'our']);

/** Whether a token carries no meaning of its own. */
export function isNoise(token: Token): boolean {
  return NOISE.has(token.text) || ASKING.has(token.text) || SEGMENT_WORDS.has(token.text);
}

/** Groups the words that found no use into pieces, each with the nearest thing that can be done. */
export function leftovers(
  sentence: string,
  tokens: readonly Token[],
  context: RequestContext,
): Understanding['notUnderstood'] {
  const pieces: { text: string; nearest: string }[] = [];
  let i = 0;
  while (i < tokens.length) {
    if (tokens[i]!.used || isNoise(tokens[i]!)) {
      i++;
      continue;
    }
    let to = i + 1;
    while (to < tokens.length && !tokens[to]!.used && (!isNoise(tokens[to]!) || joins(tokens, to))) to++;
    let from = i;
    while (from > 0 && !tokens[from - 1]!.used && (LEADING.has(tokens[from - 1]!.text) || leads(tokens, from))) from--;
    const words = tokens.slice(from, to).map((token) => token.text);
    const group = SEGMENT_WORDS.has(tokens[to]?.text ?? '') || tokens[i]!.segment !== undefined;
    pieces.push({
      text: sentence.slice(tokens[from]!.from, tokens[to - 1]!.to),
      nearest: group && !words.includes('why') ? nearestSegment(context) : nearestTo(words, context),
    });
    i = to;
  }
  return pieces;
}

/** A small word between two words that were not understood belongs to the piece. */
function joins(tokens: readonly Token[], i: number): boolean {
  const next = tokens[i + 1];
  const glue = GLUE.has(tokens[i]!.text) || LEADING.has(tokens[i]!.text);
  return glue && next !== undefined && !next.used && !isNoise(next);
}

function leads(tokens: readonly Token[], from: number): boolean {
  return GLUE.has(tokens[from - 1]!.text) && LEADING.has(tokens[from - 2]?.text ?? '') && !tokens[from - 2]!.used;
}
