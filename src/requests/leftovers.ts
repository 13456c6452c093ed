import { nearestPeriod, nearestSegment, nearestTo } from './nearest.ts';
import { ASKING, LEADING, NOISE, SEGMENT_WORDS } from './noise.ts';
import type { Token } from './tokens.ts';
import type { RequestContext, Understanding } from './types.ts';

/** Words that are noise alone and mean something in front of a word that was not understood. */
const GLUE = new Set(['the', 'a', 'an', 'and', 'our']);

/** Whether a token carries no meaning of its own. */
export function isNoise(token: Token): boolean {
  return NOISE.has(token.text) || ASKING.has(token.text) || SEGMENT_WORDS.has(token.text);
}

/** "by plan" asks for all groups side by side, though both words mean nothing alone. */
const SPLITTING = new Set(['by', 'per', 'across', 'between', 'each', 'every']);
const WINDOW = new Set(['this', 'last', 'past', 'previous', 'current']);
const PERIOD = new Set('day week month quarter year'.split(' '));
const MONTH =
  /^(january|february|march|april|june|july|august|september|october|november|december|jan|feb|mar|apr|jun|jul|aug|sept?|oct|nov|dec)$/;

/** Groups the words that found no use into pieces, each with the nearest thing that can be done. */
export function leftovers(
  sentence: string,
  tokens: readonly Token[],
  context: RequestContext,
  grouped: boolean,
): Understanding['notUnderstood'] {
  const pieces: { text: string; nearest: string }[] = [];
  let i = 0;
  while (i < tokens.length) {
    const split = splits(tokens, i, context, grouped);
    const period = !split && isPeriod(tokens, i);
    if (tokens[i]!.used || (isNoise(tokens[i]!) && !split && !period)) {
      i++;
      continue;
    }
    let to = split || period ? i + 2 : i + 1;
    while (to < tokens.length && !tokens[to]!.used && (!isNoise(tokens[to]!) || joins(tokens, to))) to++;
    let from = i;
    while (from > 0 && !tokens[from - 1]!.used && (LEADING.has(tokens[from - 1]!.text) || leads(tokens, from))) from--;
    const words = tokens.slice(from, to).map((token) => token.text);
    const group = split || SEGMENT_WORDS.has(tokens[to]?.text ?? '') || tokens[i]!.segment !== undefined;
    pieces.push({
      text: sentence.slice(tokens[from]!.from, tokens[to - 1]!.to),
      nearest:
        group && !words.includes('why')
          ? nearestSegment(context)
          : aPeriod(tokens, from, to)
            ? nearestPeriod
            : nearestTo(words, context),
    });
    i = to;
  }
  return pieces;
}

/** @param grouped whether a group was named: then "by plan Orchard" only names it */
function splits(tokens: readonly Token[], i: number, context: RequestContext, grouped: boolean): boolean {
  const [by, group, after] = [tokens[i]!, tokens[i + 1], tokens[i + 2]];
  if (by.used || !SPLITTING.has(by.text) || !group || group.used || group.segment !== undefined) return false;
  const known = SEGMENT_WORDS.has(group.text) || group.text === context.segmentColumn?.toLowerCase();
  return known && !(grouped && after?.used === true);
}

/** "this month", "last quarter" */
function isPeriod(tokens: readonly Token[], i: number): boolean {
  const [window, period] = [tokens[i]!, tokens[i + 1]];
  return !window.used && WINDOW.has(window.text) && period !== undefined && !period.used && PERIOD.has(period.text);
}

/** A piece that names one stretch of the calendar; "since …" that could not be read asks for something else. */
function aPeriod(tokens: readonly Token[], from: number, to: number): boolean {
  const piece = tokens.slice(from, to);
  if (piece.some((token) => token.text === 'since')) return false;
  return piece.some((token, at) => MONTH.test(token.text) || isPeriod(tokens, from + at));
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
