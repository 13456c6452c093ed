import { fileName, type SharedFile } from './fileInfo.ts';

/** Endings of tables, and of what somebody may take for one: the reader then says what is wrong with it. */
const TABLES = new Set(['csv', 'tsv', 'tab', 'txt', 'text', 'dat', 'xlsx', 'xls', 'xlsm', 'ods', 'parquet']);
/** Kinds the service gives to text it knows nothing more about. */
const UNKNOWN = new Set(['', 'auto', 'text', 'binary', 'csv', 'tsv', 'txt', 'xlsx', 'xls', 'ods']);

/**
 * Whether a file in a channel may be an export. What obviously is something else (pictures, documents, code, archives) is left alone:
 * people share files for other reasons than to ask about churn.
 */
export function worthReading(file: SharedFile): boolean {
  const ending = /\.([a-z0-9]{1,8})$/i.exec(fileName(file))?.[1]?.toLowerCase();
  if (ending !== undefined && TABLES.has(ending)) return true;
  const mimetype = file.mimetype ?? '';
  if (/^(image|video|audio)\//.test(mimetype) || mimetype === 'application/pdf') return false;
  if (mimetype === 'text/csv' || mimetype === 'text/tab-separated-values') return true;
  const kind = (file.filetype ?? '').toLowerCase();
  // A name without an ending, or a pasted snippet of plain text.
  return UNKNOWN.has(kind) && (ending === undefined || mimetype === 'text/plain');
}
