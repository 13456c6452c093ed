/** Signs that stand for one currency. The dollar sign stands for many, and stays a sign unless letters before it say which. */
const SIGNS: Readonly<Record<string, string>> = {
  '€': 'EUR',
  '£': 'GBP',
  '₹': 'INR',
  '₺': 'TRY',
  '₽': 'RUB',
  '₩': 'KRW',
  '₪': 'ILS',
  '₴': 'UAH',
  US$: 'USD',
  A$: 'AUD',
  AU$: 'AUD',
  C$: 'CAD',
  CA$: 'CAD',
  NZ$: 'NZD',
  HK$: 'HKD',
  S$: 'SGD',
  R$: 'BRL',
  $: '$',
  '¥': '¥',
};
/** "US$" before "$": the longer one says more. */
const BY_LENGTH = Object.keys(SIGNS).sort((a, b) => b.length - a.length);
/** Letters that stand for one; as a word of their own only. */
const SHORT_FORMS: Readonly<Record<string, string>> = { kr: 'kr', zł: 'PLN' };
const CODES: ReadonlySet<string> = new Set(Intl.supportedValuesOf('currency'));

/**
 * The currency that stands beside an amount ("€ 12.50", "12.50 EUR", "US$12").
 * @param around  the amount's text without its digits, separators and spaces
 * @returns undefined when nothing in it is a currency
 */
export function currencyBeside(around: string): string | undefined {
  const words = around.match(/\p{L}+/gu) ?? [];
  // Lower-case words are taken for codes only when nothing else stands there: "all" is a word, and a currency of Albania.
  const code =
    words.find((word) => CODES.has(word)) ?? words.find((word) => word === around && CODES.has(word.toUpperCase()));
  if (code !== undefined) return code.toUpperCase();
  const sign = BY_LENGTH.find((one) => around.includes(one));
  if (sign !== undefined) return SIGNS[sign];
  const short = words.find((word) => word.toLowerCase() in SHORT_FORMS);
  return short === undefined ? undefined : SHORT_FORMS[short.toLowerCase()];
}

/** A value of a currency column in one form: "eur", "EUR " and "€" are the same. */
export function currencyNamed(value: string): string {
  return currencyBeside(value.trim()) ?? value.trim().toUpperCase();
}
