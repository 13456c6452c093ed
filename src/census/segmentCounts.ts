import type { AccountTable } from '../accounts/types.ts';
import { OTHER_SEGMENT } from './censusSql.ts';
import type { SegmentCounts } from './types.ts';

/** Segment values counted by themselves; the rest is pooled. */
const SEGMENTS = 12;

/** The segment values a census counts by themselves: none when there is one value only, or the request names one. */
export function segmentNamesOf(table: AccountTable, asked: string | undefined): string[] {
  const { segments } = table.report;
  return asked === undefined && segments.length > 1 ? segments.slice(0, SEGMENTS).map(({ value }) => value) : [];
}

/** Counts per segment value, one entry per subgroup; values outside `names` are pooled where they occur. */
export function segmentCounts(
  names: readonly string[],
  finished: readonly { segments: ReadonlyMap<string, { accounts: number; lost: number }> }[],
): SegmentCounts[] {
  const pooled =
    !names.includes(OTHER_SEGMENT) && finished.some(({ segments }) => segments.has(OTHER_SEGMENT))
      ? [OTHER_SEGMENT]
      : [];
  if (names.length === 0) return [];
  return [...names, ...pooled].map((segment) => ({
    segment,
    accounts: finished.map(({ segments }) => segments.get(segment)?.accounts ?? 0),
    lost: finished.map(({ segments }) => segments.get(segment)?.lost ?? 0),
  }));
}
