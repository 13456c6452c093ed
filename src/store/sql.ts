import { EbbError } from '../errors.ts';

/** Whatever runs one statement: the database itself, or a transaction in it. Values are always bound, never spliced into the text. */
export interface Sql {
  query<Row = Record<string, unknown>>(text: string, params?: readonly unknown[]): Promise<readonly Row[]>;
}

/** The Postgres dialect, wherever it runs: in this process (embedded) or on a server that several processes share. */
export interface Database extends Sql {
  /** true when other processes may be working on the same data */
  readonly shared: boolean;
  transaction<T>(body: (tx: Sql) => Promise<T>): Promise<T>;
  /** several statements without values; returns the rows of the last. A failed script never leaves a half-open transaction behind. */
  script(text: string): Promise<readonly unknown[]>;
  /** runs the body while no other process is inside `alone`; the lock goes with its connection, so a dead process holds nothing */
  alone<T>(body: () => Promise<T>): Promise<T>;
  close(): Promise<void>;
}

/**
 * Values as both drivers take them: undefined becomes NULL.
 * @throws EbbError OPTION_INVALID for a text with a NUL character, which Postgres cannot hold: refused here, the same on both engines
 */
export function bound(params: readonly unknown[]): unknown[] {
  return params.map((value) => {
    if (typeof value === 'string') refuseNul(value);
    return value === undefined ? null : value;
  });
}

/**
 * A value as text for a jsonb column. Half a surrogate pair (a name cut in the middle of an emoji) becomes U+FFFD, because jsonb refuses it.
 * @throws EbbError OPTION_INVALID when some text or key holds a NUL character
 */
export function asJson(value: unknown): string {
  return JSON.stringify(value, (key, part: unknown) => {
    refuseNul(key);
    if (typeof part !== 'string') return part;
    refuseNul(part);
    return wellFormed(part);
  });
}

/** The text with every lone surrogate replaced by U+FFFD. */
export function wellFormed(text: string): string {
  return Buffer.from(text, 'utf8').toString('utf8');
}

function refuseNul(text: string): void {
  const at = text.indexOf('\0');
  if (at < 0) return;
  throw new EbbError(
    'OPTION_INVALID',
    `a text to be stored holds a NUL character at position ${at + 1}: ${JSON.stringify(text.slice(0, 40))}`,
    'Remove the NUL character from the name or value and send it again.',
  );
}
