import type { AccountTable } from '../accounts/types.ts';
import { EbbError } from '../errors.ts';
import { checkTenure } from './tenure.ts';
import type { CensusRequest } from './types.ts';

/** @throws EbbError OPTION_INVALID for a tenure, a size or days to settle that cannot be used */
export function checkRequest(request: CensusRequest): void {
  checkTenure(request.tenure);
  if (
    Number.isInteger(request.subgroupSize) &&
    request.subgroupSize >= 1 &&
    Number.isInteger(request.settleDays) &&
    request.settleDays >= 0
  )
    return;
  throw new EbbError(
    'OPTION_INVALID',
    `a subgroup size of ${request.subgroupSize} with ${request.settleDays} days to settle cannot be used`,
    'The subgroup size is a whole number from 1, the days to settle a whole number from 0.',
  );
}

/** That no account has the segment value asked for. */
export function segmentUnknown(table: AccountTable, segment: string): EbbError {
  const known = table.report.segments.map(({ value }) => value);
  return new EbbError(
    'SEGMENT_UNKNOWN',
    `no account has the ${table.report.columns.segment ?? 'segment'} "${segment}"`,
    known.length === 0 ? 'The export has no segment column.' : `The values are: ${known.slice(0, 12).join(', ')}.`,
    { detail: { segment, known } },
  );
}
