export interface SampleRecord {
  /** line of the file on which the record begins, the first is 1 */
  readonly line: number;
  readonly fields: readonly string[];
}

/**
 * Splits text into records the way RFC 4180 describes: quotes around a field, doubled quotes inside, line breaks allowed between quotes.
 * Blank lines are left out. An unfinished last record is returned as it stands.
 * @param text  line ends are line feeds
 */
export function splitRecords(text: string, delimiter: string, limit = Number.POSITIVE_INFINITY): SampleRecord[] {
  const records: SampleRecord[] = [];
  let at = 0;
  let line = 1;
  while (at < text.length && records.length < limit) {
    const startLine = line;
    const startAt = at;
    const fields: string[] = [];
    for (;;) {
      const field = readField(text, at, delimiter);
      fields.push(field.value);
      line += field.lineBreaks;
      at = field.next;
      if (text[at] !== delimiter) break;
      at++;
    }
    const blank = fields.length === 1 && text.slice(startAt, at).trim() === '';
    if (!blank) records.push({ line: startLine, fields });
    at++;
    line++;
  }
  return records;
}

function readField(text: string, from: number, delimiter: string): { value: string; next: number; lineBreaks: number } {
  let at = from;
  while (text[at] === ' ') at++;
  if (text[at] !== '"') {
    let next = from;
    while (next < text.length && text[next] !== delimiter && text[next] !== '\n') next++;
    return { value: text.slice(from, next).trim(), next, lineBreaks: 0 };
  }
  let value = '';
  let lineBreaks = 0;
  at++;
  for (;;) {
    const char = text[at];
    if (char === undefined) return { value, next: at, lineBreaks };
    if (char === '"') {
      if (text[at + 1] !== '"') break;
      at++;
    }
    if (char === '\n') lineBreaks++;
    value += char;
    at++;
  }
  at++;
  while (at < text.length && text[at] !== delimiter && text[at] !== '\n') at++;
  return { value: value.trim(), next: at, lineBreaks };
}
