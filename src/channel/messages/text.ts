/** Longest text of one section; source: Section block page, docs.slack.dev. */
export const SECTION_LENGTH = 3000;

/** The three characters that carry meaning in every text; source: Formatting message text, docs.slack.dev. */
export function escaped(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;');
}

/** Takes up no room and keeps the character after it from starting or ending bold, italics, strike-through or code. */
const JOINER = '\u2060';

/**
 * Text that may hold what somebody else wrote (column names, segment values, file names): shown as it is, able to do nothing.
 * Format characters inside a word are left alone, so that `start_date` can still be copied.
 */
export function inert(text: string): string {
  return escaped(oneLine(text)).replace(
    /(?<![\p{L}\p{N}])[*_~]|[*_~](?![\p{L}\p{N}])|`/gu,
    (character) => `${JOINER}${character}`,
  );
}

/** Somebody else's short text as code: a name that can be told apart from the sentence around it. */
export function code(text: string, longest = 80): string {
  const shown = shortened(oneLine(text), longest).replaceAll('`', 'ˋ');
  return shown === '' ? '(no name)' : `\`${escaped(shown)}\``;
}

/** For places that take plain text only (alternative text, titles), where nothing is escaped: brackets that look the same do nothing. */
export function plainLine(text: string): string {
  return oneLine(text).replaceAll('<', '‹').replaceAll('>', '›');
}

export function oneLine(text: string): string {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what must go
  return text.replace(/[\u0000-\u001F\u007F-\u009F\u2028\u2029\u202A-\u202E\u2066-\u2069]+/g, ' ').trim();
}

export function shortened(text: string, longest: number): string {
  const characters = [...text];
  return characters.length <= longest ? text : `${characters.slice(0, longest - 1).join('')}…`;
}
