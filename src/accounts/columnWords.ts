import { hasAny } from './headerWords.ts';

/** Points that the words of a header earn for a role. */
export type WordScore = (words: readonly string[]) => number;

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

export const startWords: WordScore = (words) => {
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

export const endWords: WordScore = (words) => {
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

export const idWords: WordScore = (words) => {
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

export const segmentWords: WordScore = (words) => {
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

export const amountWords: WordScore = (words) => {
  if (hasAny(words, ['id', 'date', 'at', 'currency', 'ccy', 'count'])) return 0;
  if (hasAny(words, ['mrr', 'arr', 'acv', 'arpa', 'arpu', 'arpc'])) return 10;
  if (hasAny(words, ['amount', 'revenue', 'price', 'betrag', 'preis', 'importe'])) return 9;
  if (hasAny(words, ['value', 'fee', 'fees', 'charge', 'cost', 'spend', 'total', 'sales', 'paid', 'billed', 'monthly']))
    return 6;
  return 0;
};

export const currencyWords: WordScore = (words) =>
  hasAny(words, ['currency', 'ccy', 'curr', 'wahrung', 'waehrung', 'devise', 'moneda', 'valuta']) ? 10 : 0;

export const statusWords: WordScore = (words) => (hasAny(words, ['status', 'state', 'stage']) ? 10 : 0);
export const flagWords: WordScore = (words) =>
  hasAny(words, ['test', 'internal', 'demo', 'staff']) && !hasAny(words, ['date', 'at', 'id', 'score', 'group'])
    ? 10
    : 0;
