import { EbbError } from '../errors.ts';
import { type DateReadings, dateReadings } from './dateText.ts';
import { hasAny, headerWords } from './headerWords.ts';
import type { Layout } from './layout.ts';
import { shorten } from './layout.ts';
import type { ColumnMap, ColumnRole } from './types.ts';

/** Columns by position. `status` and `flag` only serve the rules about trials and internal accounts. */
export interface Columns {
  readonly id: number | undefined;
  readonly start: number;
  readonly end: number;
  readonly segment: number | undefined;
  readonly amount: number | undefined;
  readonly status: number | undefined;
  readonly flag: number | undefined;
}

/** What the sample says about the values of one column; shares are fractions of the values that are not empty. */
interface Content {
  readonly filled: number;
  readonly rows: number;
  readonly dates: number;
  readonly numbers: number;
  readonly distinct: number;
}

const NUMBER = /^\(?[-+]?\s*[^\d\s\w]{0,2}\s?[A-Z]{0,3}\s?[-+]?\d[\d.,' \u00a0]*\s?[^\d\w\s]{0,2}\s?([A-Z]{3})?\)?$/;

function contentOf(layout: Layout, column: number): Content {
  let filled = 0;
  let dates = 0;
  let numbers = 0;
  const distinct = new Set<string>();
  for (const record of layout.sample) {
    const value = record.fields[column] ?? '';
    const readings: DateReadings = dateReadings(value);
    if (readings.kind === 'empty') continue;
    filled++;
    distinct.add(value);
    if (readings.kind !== 'unreadable') dates++;
    if (NUMBER.test(value)) numbers++;
  }
  const rows = layout.sample.length;
  return {
    filled,
    rows,
    dates: dates / Math.max(1, filled),
    numbers: numbers / Math.max(1, filled),
    distinct: distinct.size / Math.max(1, filled),
  };
}

type Score = (words: readonly string[], content: Content) => number;

/*
 * Points per role: words of the header first, content second. A column that can't hold the role by its content gets none.
 * The weights are ours, settled on the header list in test/accounts/columns.test.ts; no source.
 */
const OTHER_DATES = [
  'trial',
  'next',
  'updated',
  'modified',
  'login',
  'seen',
  'birth',
  'dob',
  'birthday',
  'invoice',
  'billing',
  'renewal',
  'renews',
  'synced',
  'exported',
  'contacted',
  'period',
  'current',
  'refreshed',
  'snapshot',
];

const startWords: Score = (words) => {
  if (
    hasAny(words, [
      'end',
      'ended',
      'ends',
      'cancel',
      'cancelled',
      'canceled',
      'churn',
      'churned',
      'until',
      'expiry',
      'expired',
      'expires',
    ])
  )
    return 0;
  let points = 0;
  if (
    hasAny(words, [
      'start',
      'started',
      'starts',
      'begin',
      'began',
      'begins',
      'beginning',
      'commenced',
      'beginn',
      'startdatum',
      'vertragsbeginn',
      'debut',
      'inicio',
      'inizio',
    ])
  )
    points = 12;
  else if (
    hasAny(words, [
      'signup',
      'subscribed',
      'joined',
      'join',
      'joining',
      'activated',
      'activation',
      'since',
      'enrolled',
      'enrolment',
      'enrollment',
      'onboarded',
      'converted',
      'conversion',
      'opened',
      'acquired',
      'alta',
    ])
  )
    points = 10;
  else if (hasAny(words, ['sign', 'signed']) && hasAny(words, ['up', 'on', 'date', 'at', 'signed'])) points = 10;
  else if (hasAny(words, ['first'])) points = hasAny(words, ['name']) ? 0 : 10;
  else if (hasAny(words, ['from', 'effective', 'inception'])) points = 8;
  else if (
    hasAny(words, ['created', 'creation', 'registered', 'registration', 'purchased', 'purchase', 'bought', 'ordered'])
  )
    points = 7;
  else if (hasAny(words, ['live', 'open', 'new'])) points = 5;
  else if (words.length === 1 && words[0] === 'date') points = 4;
  if (
    points > 0 &&
    hasAny(words, [
      'subscription',
      'sub',
      'contract',
      'paid',
      'payment',
      'paying',
      'customer',
      'membership',
      'member',
      'account',
      'plan',
    ])
  )
    points += 1;
  if (hasAny(words, ['paid', 'payment', 'paying']) && points > 0) points += 2;
  return hasAny(words, OTHER_DATES) ? points * 0.3 : points;
};

const endWords: Score = (words) => {
  let points = 0;
  if (
    hasAny(words, [
      'churn',
      'churned',
      'cancel',
      'cancelled',
      'canceled',
      'cancellation',
      'cancelation',
      'cancels',
      'terminated',
      'termination',
      'kundigung',
      'gekundigt',
      'baja',
    ])
  )
    points = 11;
  else if (
    hasAny(words, ['end', 'ended', 'ends', 'ending', 'ende', 'enddatum', 'vertragsende', 'fin', 'finished', 'finish'])
  )
    points = 12;
  else if (
    hasAny(words, [
      'expired',
      'expires',
      'expiry',
      'expiration',
      'lapsed',
      'lapse',
      'closed',
      'close',
      'closing',
      'left',
      'leave',
      'leaving',
      'departed',
      'unsubscribed',
      'unsubscribe',
      'deactivated',
      'deactivation',
      'stopped',
      'stop',
      'stops',
      'quit',
      'exit',
      'exited',
      'lost',
      'inactive',
      'offboarded',
      'attrition',
      'disconnected',
    ])
  )
    points = 10;
  else if (hasAny(words, ['until', 'thru', 'through'])) points = 9;
  else if (hasAny(words, ['to', 'last', 'off'])) points = 5;
  if (points > 0 && hasAny(words, ['reason', 'by', 'type', 'note', 'notes', 'comment', 'score', 'probability', 'risk']))
    points *= 0.2;
  return hasAny(words, OTHER_DATES) ? points * 0.3 : points;
};

const idWords: Score = (words) => {
  const idLike = hasAny(words, [
    'id',
    'uuid',
    'guid',
    'key',
    'number',
    'no',
    'nr',
    'num',
    'ref',
    'reference',
    'code',
    'identifier',
    'kundennummer',
  ]);
  const account = hasAny(words, [
    'account',
    'acct',
    'customer',
    'cust',
    'client',
    'member',
    'user',
    'subscriber',
    'company',
    'organisation',
    'organization',
    'org',
    'tenant',
    'logo',
    'household',
    'kunde',
    'kunden',
    'kundennummer',
    'cliente',
    'workspace',
    'team',
  ]);
  if (
    hasAny(words, [
      'plan',
      'product',
      'price',
      'coupon',
      'campaign',
      'country',
      'region',
      'parent',
      'invoice',
      'referral',
      'referrer',
      'postal',
      'zip',
      'phone',
      'status',
      'type',
      'segment',
      'tier',
      'channel',
      'since',
    ])
  )
    return 0;
  if (idLike && account) return 12;
  if (idLike && hasAny(words, ['subscription', 'sub', 'contract', 'membership'])) return 8;
  if (idLike && words.length === 1) return 9;
  if (idLike) return 5;
  if (hasAny(words, ['email', 'mail'])) return 6;
  if (account) return hasAny(words, ['name']) ? 6 : 7;
  return 0;
};

const segmentWords: Score = (words) => {
  if (hasAny(words, ['id', 'start', 'end', 'date', 'at'])) return 0;
  if (hasAny(words, ['plan', 'segment', 'tier', 'tarif'])) return 10;
  if (hasAny(words, ['product', 'package', 'edition', 'level', 'sku', 'subscription'])) return 8;
  if (hasAny(words, ['channel', 'region', 'market', 'country', 'cohort', 'group', 'vertical', 'industry'])) return 6;
  if (
    hasAny(words, [
      'source',
      'category',
      'type',
      'size',
      'interval',
      'frequency',
      'cycle',
      'term',
      'campaign',
      'territory',
      'state',
      'city',
      'billing',
    ])
  )
    return 4;
  return 0;
};

const amountWords: Score = (words) => {
  if (hasAny(words, ['id', 'date', 'at', 'currency', 'count'])) return 0;
  if (hasAny(words, ['mrr', 'arr', 'acv', 'arpa', 'arpu', 'arpc'])) return 10;
  if (hasAny(words, ['amount', 'revenue', 'price', 'betrag', 'preis', 'importe'])) return 9;
  if (hasAny(words, ['value', 'fee', 'fees', 'charge', 'cost', 'spend', 'total', 'sales', 'paid', 'billed', 'monthly']))
    return 6;
  return 0;
};

const statusWords: Score = (words) => (hasAny(words, ['status', 'state', 'stage']) ? 10 : 0);
const flagWords: Score = (words) =>
  hasAny(words, ['test', 'internal', 'demo', 'staff']) && !hasAny(words, ['date', 'at', 'id', 'score', 'group'])
    ? 10
    : 0;

interface Wanted {
  readonly words: Score;
  readonly content: Score;
}

const WANTED: Readonly<Record<ColumnRole | 'status' | 'flag', Wanted>> = {
  start: { words: startWords, content: (_, c) => (c.filled > 0 && c.dates >= 0.5 ? 1 : 0) },
  end: { words: endWords, content: (_, c) => (c.filled === 0 || c.dates >= 0.5 ? 1 : 0) },
  id: {
    words: idWords,
    content: (_, c) =>
      c.filled > 0 && c.dates < 0.9 ? 0.5 + c.distinct / 2 : c.filled > 0 && c.distinct > 0.5 ? 0.6 : 0,
  },
  segment: {
    words: segmentWords,
    content: (_, c) => (c.filled > 0 && c.dates < 0.5 && c.numbers < 0.9 && (c.distinct <= 0.5 || c.rows < 20) ? 1 : 0),
  },
  amount: { words: amountWords, content: (_, c) => (c.filled > 0 && c.numbers >= 0.8 ? 1 : 0) },
  status: { words: statusWords, content: (_, c) => (c.dates < 0.5 && c.distinct <= 0.5 ? 1 : 0) },
  flag: { words: flagWords, content: (_, c) => (c.dates < 0.5 && c.distinct <= 0.5 ? 1 : 0) },
};

/**
 * Recognises the columns by header words and by content; columns that the user named win.
 * @throws EbbError COLUMN_UNKNOWN, COLUMN_START_MISSING, COLUMN_END_MISSING, DATES_UNREADABLE
 */
export function recogniseColumns(layout: Layout, named: ColumnMap = {}): Columns {
  const chosen = new Map<string, number>();
  for (const role of ['id', 'start', 'end', 'segment', 'amount'] as const) {
    const name = named[role];
    if (name !== undefined) chosen.set(role, columnNamed(layout.headers, name, role));
  }
  const words = layout.headers.map(headerWords);
  const contents = layout.headers.map((_, column) => contentOf(layout, column));
  const taken = new Set(chosen.values());
  const pick = (role: keyof typeof WANTED, contentMatters = true): number | undefined => {
    const already = chosen.get(role);
    if (already !== undefined) return already;
    let best: { column: number; score: number } | undefined;
    for (const [column, header] of words.entries()) {
      const content = contents[column];
      if (taken.has(column) || !content) continue;
      const score = WANTED[role].words(header, content) * (contentMatters ? WANTED[role].content(header, content) : 1);
      if (score > (best?.score ?? 0)) best = { column, score };
    }
    if (!best) return undefined;
    chosen.set(role, best.column);
    taken.add(best.column);
    return best.column;
  };
  // Dates first: their content tells most, and "created" must not be taken for anything else.
  const start = pick('start');
  if (start === undefined) throw startMissing(layout, pick('start', false));
  const end = pick('end') ?? endWithoutDates(layout, () => pick('end', false));
  const id = pick('id');
  const amount = pick('amount');
  const segment = pick('segment');
  const status = pick('status');
  const flag = pick('flag');
  return { id, start, end, segment, amount, status, flag };
}

function startMissing(layout: Layout, byName: number | undefined): EbbError {
  const list = layout.headers.join(', ');
  if (byName === undefined) {
    return new EbbError(
      'COLUMN_START_MISSING',
      `no column looks like the start of a subscription; the columns are: ${shorten(list, 300)}`,
      'Say which one it is (on the command line: --columns start=NAME), or export with a column such as "start".',
      { detail: { headers: layout.headers } },
    );
  }
  return datesUnreadable(
    layout.headers[byName] ?? '',
    layout.sample.find((record) => record.fields[byName])?.line ?? layout.headerLine + 1,
    layout.sample.find((record) => record.fields[byName])?.fields[byName] ?? '',
  );
}

export function datesUnreadable(column: string, line: number, text: string): EbbError {
  return new EbbError(
    'DATES_UNREADABLE',
    text === ''
      ? `column "${column}" holds no date at all`
      : `no value in column "${column}" can be read as a date; line ${line} says "${shorten(text)}"`,
    'Dates are read as 2025-03-31, 31/03/2025, 03/31/2025 or 31 Mar 2025. If another column holds the dates, name it (on the command line: --columns start=NAME,end=NAME).',
    { detail: { column, line, text } },
  );
}

function endWithoutDates(layout: Layout, byName: () => number | undefined): number {
  const column = byName();
  if (column !== undefined) {
    const record = layout.sample.find(({ fields }) => dateReadings(fields[column] ?? '').kind === 'unreadable');
    throw datesUnreadable(
      layout.headers[column] ?? '',
      record?.line ?? layout.headerLine + 1,
      record?.fields[column] ?? '',
    );
  }
  throw new EbbError(
    'COLUMN_END_MISSING',
    `no column says when a subscription ended, so nobody can be seen leaving; the columns are: ${shorten(layout.headers.join(', '), 300)}`,
    'Say which one it is (on the command line: --columns end=NAME), or export with a column such as "end" that is empty for those who are still customers.',
    { detail: { headers: layout.headers } },
  );
}

function columnNamed(headers: readonly string[], name: string, role: ColumnRole): number {
  const exact = headers.indexOf(name);
  if (exact >= 0) return exact;
  const loose = headerWords(name).join(' ');
  const matches = headers.flatMap((header, at) => (headerWords(header).join(' ') === loose ? [at] : []));
  if (matches.length === 1 && matches[0] !== undefined) return matches[0];
  const nearest = [...headers].sort(
    (a, b) => distance(a.toLowerCase(), name.toLowerCase()) - distance(b.toLowerCase(), name.toLowerCase()),
  )[0];
  throw new EbbError(
    'COLUMN_UNKNOWN',
    `there is no column "${shorten(name)}" for the ${role}; the columns are: ${shorten(headers.join(', '), 300)}`,
    `Did you mean "${nearest ?? ''}"?`,
    { detail: { role, name, nearest, headers } },
  );
}

/** Edits (insert, delete, replace a character) from one text to the other. */
function distance(from: string, to: string): number {
  let row = Array.from({ length: to.length + 1 }, (_, at) => at);
  for (let i = 1; i <= from.length; i++) {
    const next = [i];
    for (let j = 1; j <= to.length; j++) {
      next.push(
        Math.min((row[j] ?? 0) + 1, (next[j - 1] ?? 0) + 1, (row[j - 1] ?? 0) + (from[i - 1] === to[j - 1] ? 0 : 1)),
      );
    }
    row = next;
  }
  return row[to.length] ?? 0;
}
