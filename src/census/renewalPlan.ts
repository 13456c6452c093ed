import type { AccountTable } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import { assumedRate, oneDigit, recommendSize, weeks } from './plan.ts';
import { countRenewals } from './renewalCensus.ts';
import { subgroupSizes } from './sizes.ts';
import type { CensusPlan } from './types.ts';

/**
 * Recommends the size of a point in the renewal view from the renewals' own rate, which is not that of the first ones alone.
 * @param plan  what was recommended for the start view: its tenure is the time from one renewal to the next
 * @throws EbbError OPTION_INVALID for a tenure that cannot be one
 */
export async function planRenewals(
  table: AccountTable,
  plan: CensusPlan,
  asked: { readonly asOf: Day; readonly settleDays: number; readonly segment?: string; readonly subgroupSize?: number },
): Promise<CensusPlan> {
  const { subgroupSize, ...scope } = asked;
  const { accounts, lost, perWeek } = await countRenewals(table, { tenure: plan.tenure, ...scope });
  const rate = accounts === 0 ? 0 : lost / accounts;
  const sizes = subgroupSizes(assumedRate(rate, accounts));
  const size =
    subgroupSize === undefined
      ? recommendSize(accounts, sizes, 'renewals')
      : { subgroupSize, why: `${subgroupSize.toLocaleString('en-GB')} renewals a point, as asked` };
  const waits =
    perWeek > 0
      ? `; at about ${oneDigit(perWeek)} renewals a week a point takes ${weeks(size.subgroupSize / perWeek)}`
      : '';
  return { ...plan, subgroupSize: size.subgroupSize, sizeWhy: `${size.why}${waits}`, sizes, rate };
}
