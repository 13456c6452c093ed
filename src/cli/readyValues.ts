import type { ChartKind } from '../charts/types.ts';
import { EbbError } from '../errors.ts';

/** Kinds whose points are ready values and not counts. */
export type ValuesKind = Extract<ChartKind, 'g' | 't' | 'individuals'>;

const WHAT: Readonly<Record<ValuesKind, { readonly must: string; readonly holds: (value: number) => boolean }>> = {
  g: {
    must: 'a whole number of at least 0: accounts kept between two losses',
    holds: (value) => Number.isInteger(value) && value >= 0,
  },
  t: { must: 'a number of at least 0: the time between two losses', holds: (value) => value >= 0 },
  individuals: { must: 'a number', holds: () => true },
};

/** Past this the numbers themselves lose digits. */
const LARGEST = 1e12;

export function isValuesKind(kind: ChartKind | 'auto' | undefined): kind is ValuesKind {
  return kind !== undefined && kind in WHAT;
}

/**
 * Reads --values "4,12,30" for a g, t or individuals chart.
 * @param most  no more values than this
 * @throws EbbError COUNTS_INVALID naming the entry
 */
export function readyValues(text: string, kind: ValuesKind, most: number): number[] {
  // A comma or semicolon with nothing before or after it is a value that is missing, not one to pass over.
  const parts = text.trim() === '' ? [] : text.trim().split(/\s*[,;]\s*|\s+/);
  if (parts.length === 0)
    throw new EbbError('COUNTS_INVALID', '--values is empty', 'For example: ebb chart --chart g --values "4,12,30,7"');
  if (parts.length > most)
    throw new EbbError(
      'COUNTS_INVALID',
      `--values has ${parts.length} entries, more than the ${most} that can be charted`,
      'Chart a shorter stretch.',
    );
  return parts.map((part, i) => {
    const value = Number(part);
    if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(part) || Math.abs(value) > LARGEST || !WHAT[kind].holds(value))
      throw new EbbError(
        'COUNTS_INVALID',
        `--values, entry ${i + 1}: "${part}" is not ${WHAT[kind].must}`,
        'Separate numbers by commas, with a point for decimals.',
      );
    return value;
  });
}
