import { checkAsOf } from '../../accounts/checkAsOf.ts';
import type { AccountTable } from '../../accounts/types.ts';
import { planCensus } from '../../census/plan.ts';
import type { CensusPlan, Tenure } from '../../census/types.ts';
import type { Day } from '../../days.ts';
import { EbbError } from '../../errors.ts';
import type { Scope } from '../../requests/types.ts';

/** Which accounts a question is about, up to which day, settled against the data. */
export interface ResolvedScope {
  readonly asOf: Day;
  readonly settleDays: number;
  /** the segment value as the data writes it; absent for all accounts */
  readonly segment?: string;
}

/**
 * Settles a question's scope against the data.
 * @throws EbbError SEGMENT_UNKNOWN, AS_OF_TOO_LATE
 */
export function resolveScope(table: AccountTable, scope: Scope): ResolvedScope {
  const { report } = table;
  const asOf = scope.asOf ?? report.asOf;
  checkAsOf(asOf, report.inferredAsOf);
  return {
    asOf,
    settleDays: scope.settleDays ?? 0,
    ...(scope.segment === undefined ? {} : { segment: knownSegment(table, scope.segment) }),
  };
}

/** The tenure point and the subgroup size of a question, and for a group the age taken from all accounts. */
export interface ResolvedPlan {
  readonly plan: CensusPlan;
  /** set when a group is read at the age of all accounts, so that the two figures can be compared */
  readonly tenureOfAll?: Tenure;
}

export async function resolvePlan(table: AccountTable, scope: Scope, resolved: ResolvedScope): Promise<ResolvedPlan> {
  const { asOf, settleDays, segment } = resolved;
  const tenureOfAll =
    segment === undefined || scope.tenure ? undefined : (await planCensus(table, { asOf, settleDays })).tenure;
  const tenure = scope.tenure ?? tenureOfAll;
  const plan = await planCensus(table, {
    ...resolved,
    ...(tenure ? { tenure } : {}),
    ...(scope.subgroupSize ? { subgroupSize: scope.subgroupSize } : {}),
  });
  return { plan, ...(tenureOfAll ? { tenureOfAll } : {}) };
}

function knownSegment(table: AccountTable, wanted: NonNullable<Scope['segment']>): string {
  const { report } = table;
  const column = report.columns.segment;
  if (column === undefined) {
    throw new EbbError(
      'SEGMENT_UNKNOWN',
      'the export has no column that groups accounts',
      'Name the column that does (on the command line: --columns segment=COLUMN).',
    );
  }
  const exact = report.segments.find((entry) => entry.value === wanted.value);
  const folded = report.segments.find((entry) => entry.value.toLowerCase() === wanted.value.toLowerCase());
  const found = exact ?? folded;
  if (!found) {
    const known = report.segments.slice(0, 8).map((entry) => entry.value);
    throw new EbbError(
      'SEGMENT_UNKNOWN',
      `no account has "${wanted.value}" in column "${column}"`,
      `It has ${known.map((value) => `"${value}"`).join(', ')}${report.segments.length > known.length ? ' and others' : ''}.`,
    );
  }
  return found.value;
}
