import { closeSync, openSync, readSync } from 'node:fs';

/** Where a row of the engine's table stands in the file. */
export interface RowPlace {
  readonly line: number;
  /** the record as it stands in the file, at most 4 KB of it */
  readonly text: string;
}

const CHUNK_BYTES = 1 << 20;
const QUOTE = 0x22;
const NEWLINE = 0x0a;
const SPACE = 0x20;
const RETURN = 0x0d;

/**
 * Finds the lines of given rows by walking through the file once, up to the last one wanted. Only called when something must be shown
 * to a person: the engine's table itself carries no lines, which keeps reading fast.
 * @param path       UTF-8
 * @param delimiter  one character
 * @param skipped    byte offsets (from 0) at which records begin that the engine left out
 * @param rows       ordinals in the engine's table, counted from 0 with the header among them
 * @returns places by ordinal, and by byte offset for those skipped
 */
export function findLines(
  path: string,
  delimiter: string,
  skipped: ReadonlySet<number>,
  rows: ReadonlySet<number>,
): { rows: Map<number, RowPlace>; skipped: Map<number, RowPlace> } {
  const found = { rows: new Map<number, RowPlace>(), skipped: new Map<number, RowPlace>() };
  const separator = delimiter.charCodeAt(0);
  const file = openSync(path, 'r');
  try {
    let buffer: Buffer = Buffer.alloc(0);
    let base = 0;
    let ended = false;
    let line = 1;
    let ordinal = 0;
    // The engine counts blank lines as part of the record that follows them.
    let blanksFrom: number | undefined;
    const last = Math.max(-1, ...rows);
    let at = 0;
    while (found.skipped.size < skipped.size || ordinal <= last) {
      let end = recordEnd(buffer, at, separator, ended);
      while (end === undefined) {
        const chunk = Buffer.alloc(CHUNK_BYTES);
        const bytesRead = readSync(file, chunk, 0, CHUNK_BYTES, base + buffer.length);
        if (bytesRead === 0) ended = true;
        buffer = Buffer.concat([buffer.subarray(at), chunk.subarray(0, bytesRead)]);
        base += at;
        at = 0;
        end = recordEnd(buffer, at, separator, ended);
      }
      if (at >= buffer.length && ended) break;
      const offset = base + at;
      const breaks = countBreaks(buffer, at, end);
      if (isBlank(buffer, at, end)) {
        blanksFrom ??= offset;
      } else {
        const isSkipped = skipped.has(offset)
          ? offset
          : blanksFrom !== undefined && skipped.has(blanksFrom)
            ? blanksFrom
            : undefined;
        const place = (): RowPlace => ({
          line,
          text: buffer.toString('utf8', at, Math.min(end ?? at, at + 4096)).trimEnd(),
        });
        if (isSkipped !== undefined) found.skipped.set(isSkipped, place());
        else {
          if (rows.has(ordinal)) found.rows.set(ordinal, place());
          ordinal++;
        }
        blanksFrom = undefined;
      }
      line += breaks;
      at = end;
    }
  } finally {
    closeSync(file);
  }
  return found;
}

/** A record longer than this is one whose quote was never closed. */
const LONGEST_RECORD_BYTES = 2 << 20;

/**
 * Counts the records that are not blank, or finds the line of one whose quote is never closed. Our own count, to hold against the engine's:
 * it has been seen to drop such a record, with thousands of rows inside the quote, without a word.
 */
export function countRecords(path: string, delimiter: string): { records: number; unclosedLine: number | undefined } {
  const separator = delimiter.charCodeAt(0);
  const file = openSync(path, 'r');
  try {
    let buffer: Buffer = Buffer.alloc(0);
    let read = 0;
    let at = 0;
    let line = 1;
    let records = 0;
    for (;;) {
      let end = recordEnd(buffer, at, separator, false);
      while (end === undefined) {
        if (buffer.length - at > LONGEST_RECORD_BYTES) return { records, unclosedLine: line };
        const chunk = Buffer.alloc(CHUNK_BYTES);
        const bytesRead = readSync(file, chunk, 0, CHUNK_BYTES, read);
        read += bytesRead;
        if (bytesRead === 0) {
          // The last record may lack its line feed; with one added, only an open quote keeps it from ending.
          const last = Buffer.concat([buffer.subarray(at), Buffer.from('\n\n')]);
          if (recordEnd(last, 0, separator, false) === undefined) return { records, unclosedLine: line };
          return { records: isBlank(last, 0, last.length) ? records : records + 1, unclosedLine: undefined };
        }
        buffer = Buffer.concat([buffer.subarray(at), chunk.subarray(0, bytesRead)]);
        at = 0;
        end = recordEnd(buffer, at, separator, false);
      }
      if (!isBlank(buffer, at, end)) records++;
      line += countBreaks(buffer, at, end);
      at = end;
    }
  } finally {
    closeSync(file);
  }
}

/** Index behind the record's line feed; undefined when the buffer ends before the record does. */
function recordEnd(buffer: Buffer, from: number, separator: number, ended: boolean): number | undefined {
  const newline = buffer.indexOf(NEWLINE, from);
  const lineEnd = newline < 0 ? buffer.length : newline;
  const quote = buffer.subarray(from, lineEnd).indexOf(QUOTE);
  if (quote < 0) return newline < 0 ? (ended ? buffer.length : undefined) : newline + 1;
  let at = from;
  while (at < buffer.length) {
    // at the beginning of a field
    let start = at;
    while (buffer[start] === SPACE) start++;
    if (buffer[start] === QUOTE) {
      at = start + 1;
      for (;;) {
        const close = buffer.indexOf(QUOTE, at);
        if (close < 0) return ended ? buffer.length : undefined;
        if (close + 1 >= buffer.length && !ended) return undefined;
        at = close + 1;
        if (buffer[at] !== QUOTE) break;
        at++;
      }
    }
    while (at < buffer.length && buffer[at] !== separator && buffer[at] !== NEWLINE) at++;
    if (at < buffer.length && buffer[at] === NEWLINE) return at + 1;
    at++;
  }
  return ended ? buffer.length : undefined;
}

function countBreaks(buffer: Buffer, from: number, to: number): number {
  let count = 0;
  for (let at = buffer.indexOf(NEWLINE, from); at >= 0 && at < to; at = buffer.indexOf(NEWLINE, at + 1)) count++;
  return count;
}

function isBlank(buffer: Buffer, from: number, to: number): boolean {
  for (let at = from; at < to; at++) {
    const byte = buffer[at];
    if (byte !== SPACE && byte !== RETURN && byte !== NEWLINE && byte !== 9) return false;
  }
  return true;
}
