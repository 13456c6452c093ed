/** One word, number or date of a sentence. `used` turns true once a phrase has consumed it. */
export interface Token {
  /** lower case, apostrophes straight */
  readonly text: string;
  /** where it stands in the sentence */
  readonly from: number;
  readonly to: number;
  /** set for a quoted segment value */
  readonly segment?: string;
  used: boolean;
}

/** Characters that stand in for quoted segment values while the sentence is cut up. */
const STAND_IN = 0xe000;

const PIECE =
  /[\uE000-\uF8FF]|\d{4}-\d{1,2}-\d{1,2}|\d{1,2}[./]\d{1,2}[./]\d{2,4}|\d{1,3}(?:,\d{3})+|\d+(?:\.\d+)?|[\p{L}\p{M}]+(?:'[\p{L}\p{M}]+)?/gu;

/**
 * Cuts a sentence into tokens. Segment values in quotes become one token each, whatever they hold, so that a value such as
 * "since March" can be asked for.
 * @param text     the sentence, without the platform's mark-up
 * @param segments values that occur in the data
 */
export function tokens(
  text: string,
  segments: readonly string[],
): { readonly sentence: string; readonly list: Token[] } {
  const { sentence, values, shift } = withStandIns(text, segments);
  const list: Token[] = [];
  for (const match of sentence.matchAll(PIECE)) {
    const piece = match[0];
    const segment = values.get(piece);
    const from = match.index;
    const token = { text: piece.toLowerCase(), from: shift(from), to: shift(from + piece.length), used: false };
    list.push(segment === undefined ? token : { ...token, segment });
  }
  return { sentence: text, list };
}

/** Replaces each quoted segment value by one private character, longest values first, exact case before any case. */
function withStandIns(
  text: string,
  segments: readonly string[],
): { sentence: string; values: ReadonlyMap<string, string>; shift: (at: number) => number } {
  let sentence = text.replace(/[\uE000-\uF8FF]/g, ' ').replace(/[‘’]/g, "'");
  const values = new Map<string, string>();
  const lengths: { at: number; length: number }[] = [];
  const ordered = [...segments].filter((value) => value !== '').sort((a, b) => b.length - a.length);
  for (const anyCase of [false, true]) {
    for (const value of ordered) {
      const wanted = value.replace(/[‘’]/g, "'").replace(/[\uE000-\uF8FF]/g, ' ');
      for (const [open, close] of [
        ['“', '”'],
        ['"', '"'],
        ["'", "'"],
      ] as const) {
        const quoted = `${open}${wanted}${close}`;
        const at = anyCase ? sentence.toLowerCase().indexOf(quoted.toLowerCase()) : sentence.indexOf(quoted);
        // The lower-cased sentence may differ in length for a few letters; then the place would be wrong.
        if (at < 0 || (anyCase && sentence.toLowerCase().length !== sentence.length)) continue;
        const mark = String.fromCharCode(STAND_IN + values.size);
        values.set(mark, value);
        sentence = `${sentence.slice(0, at)}${mark}${sentence.slice(at + quoted.length)}`;
        for (const entry of lengths) if (entry.at > at) entry.at -= quoted.length - 1;
        lengths.push({ at, length: quoted.length });
      }
    }
  }
  const shift = (at: number): number =>
    lengths.reduce((sum, entry) => (entry.at < at ? sum + entry.length - 1 : sum), at);
  return { sentence, values, shift };
}
