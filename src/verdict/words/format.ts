/**
 * A rate in words: "6.2 %", two decimals below 1 %. Rates stay fractions everywhere else.
 */
export function percent(rate: number): string {
  if (rate === 0) return '0 %';
  const value = rate * 100;
  return `${value.toFixed(Math.abs(value) < 0.995 ? 2 : 1)} %`;
}

/** A difference of two rates in percentage points, signed: "−2.1 points". */
export function percentagePoints(difference: number): string {
  const value = difference * 100;
  const digits = Math.abs(value) < 0.995 ? 2 : 1;
  const text = Math.abs(value).toFixed(digits);
  return `${Number(text) === 0 ? '' : value < 0 ? '−' : '+'}${text}`;
}

/** A count with thousands separated: 12,480. */
export function count(n: number): string {
  return Math.round(n).toLocaleString('en-US');
}

/** "1 account", "85 accounts". */
export function counted(n: number, one: string, many = `${one}s`): string {
  return `${count(n)} ${Math.round(n) === 1 ? one : many}`;
}

const SMALL = [
  'zero',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
];

/** Small whole numbers as words, as running text wants them. */
export function numberWord(n: number): string {
  return SMALL[n] ?? count(n);
}

/** "a, b and c". */
export function listed(parts: readonly string[]): string {
  if (parts.length <= 1) return parts[0] ?? '';
  return `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`;
}

export function capitalised(text: string): string {
  return text.slice(0, 1).toUpperCase() + text.slice(1);
}
