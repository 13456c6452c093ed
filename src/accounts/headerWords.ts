/**
 * The words of a column name, lower case and without accents: "subscriptionStartDate", "Subscription Start (Date)" and
 * "subscription_start_date" all give ["subscription", "start", "date"].
 */
export function headerWords(header: string): readonly string[] {
  return header
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .replace(/([\p{Ll}\d])(\p{Lu})/gu, '$1 $2')
    .replace(/(\p{Lu})(\p{Lu}\p{Ll})/gu, '$1 $2')
    .toLowerCase()
    .split(/[^\p{L}\p{N}]+/u)
    .flatMap(splitCompound)
    .filter((word) => word !== '');
}

export function hasAny(words: readonly string[], wanted: readonly string[]): boolean {
  return words.some((word) => wanted.includes(word));
}

const TAILS = ['date', 'datetime', 'time', 'day', 'timestamp', 'id', 'name', 'dt', 'ts', 'at', 'on'];
const HEADS = [
  'start',
  'end',
  'signup',
  'cancel',
  'cancelled',
  'canceled',
  'churn',
  'churned',
  'created',
  'joined',
  'expiry',
  'close',
  'closed',
  'activated',
  'customer',
  'account',
  'user',
  'member',
  'client',
  'subscriber',
  'subscription',
  'plan',
  'join',
  'begin',
  'termination',
  'cancellation',
];

/** "startdate", "customerid" are written together often enough to be taken apart. */
function splitCompound(word: string): string[] {
  for (const tail of TAILS) {
    const head = word.slice(0, -tail.length);
    if (word.endsWith(tail) && HEADS.includes(head)) return [head, tail];
  }
  return [word];
}
