import type { Tenure } from './types.ts';

const UNITS: Readonly<Record<string, { unit: Tenure['unit']; times: number }>> = {
  d: { unit: 'day', times: 1 },
  day: { unit: 'day', times: 1 },
  w: { unit: 'week', times: 1 },
  week: { unit: 'week', times: 1 },
  m: { unit: 'month', times: 1 },
  mo: { unit: 'month', times: 1 },
  month: { unit: 'month', times: 1 },
  quarter: { unit: 'month', times: 3 },
  y: { unit: 'month', times: 12 },
  year: { unit: 'month', times: 12 },
};

/** Longest tenure point read: twenty years. */
const MOST_MONTHS = 240;

/**
 * Reads "3 months", "90 days", "1 year", "6m".
 * @returns undefined when the text is no such age, is zero, or is longer than twenty years
 */
export function parseTenure(text: string): Tenure | undefined {
  const match = /^\s*(\d{1,4})?\s*-?\s*([a-z]+?)s?\s*$/i.exec(text);
  const unit = UNITS[match?.[2]?.toLowerCase() ?? ''];
  if (!match || !unit) return undefined;
  const count = Number(match[1] ?? 1) * unit.times;
  const months = unit.unit === 'month' ? count : unit.unit === 'week' ? count / 4.345 : count / 30.44;
  return count >= 1 && months <= MOST_MONTHS ? { count, unit: unit.unit } : undefined;
}
