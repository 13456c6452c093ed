/**
 * The one catalogue of errors meant for people. Each has a stable code (callers test the code, never the text), a message that says
 * what is wrong and where, and a hint that says how to mend it. DEVELOPERS.md lists the same codes; a test compares the two.
 */
export const ERROR_CODES = {
  // the file
  FILE_MISSING: 'there is no such file, or it cannot be opened',
  FILE_EMPTY: 'the file holds nothing',
  FILE_TOO_LARGE: 'the file is larger than Ebbline reads',
  FILE_BINARY: 'the file is not text',
  FILE_NOT_CSV: 'the content is not what the name says, or not a table',
  FILE_LINE_TOO_LONG: 'one line is longer than any row of a table',
  HEADER_MISSING: 'the first line does not look like column names',
  ROWS_MISSING: 'there is a header and nothing under it',
  COLUMN_SINGLE: 'there is only one column',
  COLUMN_UNKNOWN: 'a column was named that the file does not have',
  COLUMN_START_MISSING: 'no column looks like the start of a subscription',
  COLUMN_END_MISSING: 'no column says when a subscription ended',
  DATES_UNREADABLE: 'no value in a date column can be read',
  DATES_MIXED: 'some dates read only day-first and others only month-first',
  DATES_AMBIGUOUS: 'the dates read both as day-first and as month-first',
  AS_OF_TOO_LATE: 'the data-through date lies long after anything in the file',
  ACCOUNTS_NONE: 'no row is left to count',
  // the request
  OPTION_UNKNOWN: 'there is no such option',
  OPTION_INVALID: 'an option has a value that cannot be used',
  COMMAND_UNKNOWN: 'there is no such command',
  SEGMENT_UNKNOWN: 'no account has that segment value',
  COUNTS_INVALID: 'the counts or sizes cannot be charted',
  PICTURE_UNWRITABLE: 'the picture or points file cannot be written',
  // the running bot
  SETTINGS_INVALID: 'a setting is missing or cannot be used',
  STORE_LOCKED: 'another process has the data folder open',
  STORE_NEWER: 'the stored data was written by a newer version',
  DATASET_MISSING: 'nothing has been uploaded here yet',
  UPSTREAM_FAILED: 'the chat service did not do what was asked',
} as const;

export type ErrorCode = keyof typeof ERROR_CODES;

export type ErrorKind = 'input' | 'settings' | 'upstream' | 'bug';

export class EbbError extends Error {
  readonly code: ErrorCode;
  readonly hint: string;
  readonly kind: ErrorKind;
  /** further facts for whoever shows the error: readings of a date, candidate columns, … */
  readonly detail: Readonly<Record<string, unknown>>;

  constructor(
    code: ErrorCode,
    message: string,
    hint: string,
    options: { kind?: ErrorKind; cause?: unknown; detail?: Readonly<Record<string, unknown>> } = {},
  ) {
    super(message, options.cause === undefined ? {} : { cause: options.cause });
    this.name = 'EbbError';
    this.code = code;
    this.hint = hint;
    this.kind = options.kind ?? 'input';
    this.detail = options.detail ?? {};
  }
}
