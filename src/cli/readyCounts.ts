import type { SubgroupCount } from '../charts/types.ts';
import { EbbError } from '../errors.ts';

/**
 * Reads --counts "12,15,8" with --sizes 50 or --sizes "50,48,51".
 * @throws EbbError COUNTS_INVALID naming the entry
 */
export function readyCounts(counts: string | undefined, sizes: string | undefined): SubgroupCount[] {
  if (counts === undefined || sizes === undefined) {
    throw new EbbError(
      'COUNTS_INVALID',
      `--${counts === undefined ? 'counts' : 'sizes'} is missing`,
      'For example: ebb chart --counts "12,15,8" --sizes 50',
    );
  }
  const lost = numbers('--counts', counts, 0);
  const accounts = numbers('--sizes', sizes, 1);
  if (accounts.length !== 1 && accounts.length !== lost.length) {
    throw new EbbError(
      'COUNTS_INVALID',
      `--sizes has ${accounts.length} entries and --counts has ${lost.length}`,
      'Give one size for all, or one for each count.',
    );
  }
  return lost.map((d, i) => {
    const n = accounts.length === 1 ? accounts[0]! : accounts[i]!;
    if (d > n)
      throw new EbbError(
        'COUNTS_INVALID',
        `--counts, entry ${i + 1}: ${d} lost of ${n} accounts`,
        'A count cannot be larger than its size.',
      );
    return { accounts: n, lost: d };
  });
}

function numbers(option: string, text: string, least: number): number[] {
  return text
    .split(/[,;\s]+/)
    .filter((part) => part !== '')
    .map((part, i) => {
      const value = Number(part);
      if (!/^\d+$/.test(part) || value < least || value > 1_000_000_000) {
        throw new EbbError(
          'COUNTS_INVALID',
          `${option}, entry ${i + 1}: "${part}" is not a whole number of at least ${least}`,
          'Separate whole numbers by commas.',
        );
      }
      return value;
    });
}
