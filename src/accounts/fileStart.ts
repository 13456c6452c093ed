import { open } from 'node:fs/promises';
import { EbbError } from '../errors.ts';

/** The largest line read: no row of an account table comes near it. */
export const LONGEST_LINE_BYTES = 64 * 1024;
const START_BYTES = 256 * 1024;

export type Encoding = 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';

export interface FileStart {
  readonly encoding: Encoding;
  /** bytes of the byte order mark, 0 without one */
  readonly markBytes: number;
  /** the decoded beginning, whole lines only, unless the file is shorter */
  readonly text: string;
  /** true when the whole file is in `text` */
  readonly whole: boolean;
  readonly sizeBytes: number;
}

const MAGIC: readonly { readonly bytes: readonly number[]; readonly what: string }[] = [
  { bytes: [0x89, 0x50, 0x4e, 0x47], what: 'a PNG picture' },
  { bytes: [0xff, 0xd8, 0xff], what: 'a JPEG picture' },
  { bytes: [0x47, 0x49, 0x46, 0x38], what: 'a GIF picture' },
  { bytes: [0x25, 0x50, 0x44, 0x46], what: 'a PDF document' },
  { bytes: [0x1f, 0x8b], what: 'a gzip archive' },
  { bytes: [0x42, 0x5a, 0x68], what: 'a bzip2 archive' },
  { bytes: [0x37, 0x7a, 0xbc, 0xaf], what: 'a 7-Zip archive' },
  { bytes: [0x28, 0xb5, 0x2f, 0xfd], what: 'a Zstandard archive' },
  { bytes: [0x50, 0x41, 0x52, 0x31], what: 'a Parquet file' },
  { bytes: [0xd0, 0xcf, 0x11, 0xe0], what: 'an old Office document (.xls, .doc)' },
  { bytes: [0x7f, 0x45, 0x4c, 0x46], what: 'a program' },
  { bytes: [0x53, 0x51, 0x4c, 0x69, 0x74, 0x65, 0x20, 0x66], what: 'an SQLite database' },
];

const EXPORT_AGAIN = 'Export the accounts as CSV (comma-separated text) and send that file.';

function binaryKind(head: Buffer): string | undefined {
  if (head.subarray(0, 4).equals(Buffer.from([0x50, 0x4b, 3, 4]))) {
    const names = head.toString('latin1');
    if (names.includes('xl/') || names.includes('[Content_Types].xml'))
      return 'an Excel or other Office document (.xlsx)';
    return 'a ZIP archive';
  }
  return MAGIC.find(({ bytes }) => bytes.every((byte, at) => head[at] === byte))?.what;
}

function notTableKind(text: string): string | undefined {
  const start = text.trimStart().slice(0, 2000);
  if (/^<(!doctype\s+html|html|head|body)\b/i.test(start)) {
    return /password|sign in|log ?in/i.test(text) ? 'a web page (it looks like a login page)' : 'a web page (HTML)';
  }
  if (/^<\?xml|^<[a-z][\w:-]*[\s>]/i.test(start)) return 'an XML document';
  if (/^\{\s*(["}]|$)/.test(start) || /^\[\s*[[{"\]\d]/.test(start)) return 'JSON';
  if (/^\{\\rtf/.test(start)) return 'a rich-text document (RTF)';
  return undefined;
}

function encodingOf(head: Buffer, whole: boolean): { encoding: Encoding; markBytes: number } {
  if (head[0] === 0xef && head[1] === 0xbb && head[2] === 0xbf) return { encoding: 'utf-8', markBytes: 3 };
  if (head[0] === 0xff && head[1] === 0xfe) return { encoding: 'utf-16le', markBytes: 2 };
  if (head[0] === 0xfe && head[1] === 0xff) return { encoding: 'utf-16be', markBytes: 2 };
  // Text of the Latin alphabet in UTF-16 has a zero in nearly every second byte.
  let even = 0;
  let odd = 0;
  const looked = Math.min(head.length, 4096) & ~1;
  for (let at = 0; at < looked; at += 2) {
    if (head[at] === 0) even++;
    if (head[at + 1] === 0) odd++;
  }
  if (odd > looked * 0.3 && even === 0) return { encoding: 'utf-16le', markBytes: 0 };
  if (even > looked * 0.3 && odd === 0) return { encoding: 'utf-16be', markBytes: 0 };
  try {
    // A character cut by the end of the sample is no error: hence the stream flag.
    new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: !whole });
    return { encoding: 'utf-8', markBytes: 0 };
  } catch {
    return { encoding: 'windows-1252', markBytes: 0 };
  }
}

/**
 * Reads the first 256 KB and settles what the file is, before anything larger is done with it.
 * @throws EbbError FILE_MISSING, FILE_EMPTY, FILE_TOO_LARGE, FILE_BINARY, FILE_NOT_CSV, FILE_LINE_TOO_LONG
 */
export async function readFileStart(path: string, maxBytes: number): Promise<FileStart> {
  let head: Buffer;
  let sizeBytes: number;
  try {
    const file = await open(path, 'r');
    try {
      const stat = await file.stat();
      if (stat.isDirectory())
        throw new EbbError('FILE_MISSING', `${path} is a folder, not a file`, 'Name the CSV file inside it.');
      sizeBytes = stat.size;
      if (sizeBytes > maxBytes) {
        throw new EbbError(
          'FILE_TOO_LARGE',
          `the file holds ${megabytes(sizeBytes)} and Ebbline reads up to ${megabytes(maxBytes)}`,
          'Leave out columns that are not needed (id, start, end and a segment are enough), or raise the limit in the settings.',
        );
      }
      const buffer = Buffer.alloc(START_BYTES);
      const { bytesRead } = await file.read(buffer, 0, START_BYTES, 0);
      head = buffer.subarray(0, bytesRead);
    } finally {
      await file.close();
    }
  } catch (error) {
    if (error instanceof EbbError) throw error;
    throw new EbbError('FILE_MISSING', `${path} cannot be opened`, 'Check the name and that the file may be read.', {
      cause: error,
    });
  }
  const whole = head.length >= sizeBytes;
  const binary = binaryKind(head);
  if (binary)
    throw new EbbError('FILE_BINARY', `the file is ${binary}, not a table of text`, EXPORT_AGAIN, {
      detail: { what: binary },
    });
  const { encoding, markBytes } = encodingOf(head, whole);
  const decoded = new TextDecoder(encoding).decode(head.subarray(markBytes), { stream: !whole });
  if (decoded.trim() === '') {
    throw new EbbError(
      'FILE_EMPTY',
      'the file holds nothing',
      'Export again: the file needs a line of column names and one line per subscription.',
    );
  }
  let controls = 0;
  for (let at = 0; at < decoded.length; at++) {
    const code = decoded.charCodeAt(at);
    if (code === 0 || (code < 32 && code !== 9 && code !== 10 && code !== 13 && code !== 12)) controls++;
  }
  if (controls > decoded.length * 0.001) {
    throw new EbbError('FILE_BINARY', 'the file holds binary data, not text', EXPORT_AGAIN, {
      detail: { what: 'binary data' },
    });
  }
  const other = notTableKind(decoded);
  if (other)
    throw new EbbError('FILE_NOT_CSV', `the file is ${other}, not a table with columns`, EXPORT_AGAIN, {
      detail: { what: other },
    });
  const lines = decoded.split(/\r\n|\n|\r/);
  const long = lines.findIndex((line) => line.length > LONGEST_LINE_BYTES);
  if (long >= 0) throw lineTooLong(long + 1);
  if (!whole && lines.length > 1) lines.pop();
  return { encoding, markBytes, text: lines.join('\n'), whole, sizeBytes };
}

export function lineTooLong(line: number): EbbError {
  return new EbbError(
    'FILE_LINE_TOO_LONG',
    `line ${line} runs on for more than ${LONGEST_LINE_BYTES / 1024} KB without an end`,
    'A row of a table is far shorter: check that the file has line breaks and that every opening quote is closed, and export again.',
    { detail: { line } },
  );
}

function megabytes(bytes: number): string {
  return bytes < 1e5 ? `${bytes} bytes` : `${(bytes / 1e6).toFixed(bytes < 1e7 ? 1 : 0)} MB`;
}
