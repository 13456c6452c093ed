import type { Tenure } from '../census/types.ts';
import { dayInWords } from '../days.ts';
import type { Request } from './types.ts';

/** An age in words: "6 months", "1 week". */
export function tenureInWords(tenure: Tenure): string {
  return `${tenure.count} ${tenure.unit}${tenure.count === 1 ? '' : 's'}`;
}

/**
 * A request put back into words, complete: understanding these words gives the same request again.
 * @example putIntoWords({ kind: 'ask', tenure: { count: 6, unit: 'month' } }) // 'has churn at 6 months moved?'
 */
export function putIntoWords(request: Request): string {
  if (request.kind === 'help') return 'help';
  if (request.kind === 'data') return 'what did you read?';
  const { tenure, segment, since, subgroupSize, baseline, settleDays, asOf } = request;
  const parts = [
    'has churn',
    tenure && ` at ${tenureInWords(tenure)}`,
    ' moved',
    segment &&
      (segment.column === undefined ? ` for “${segment.value}”` : ` where ${segment.column} is “${segment.value}”`),
    since !== undefined && `, judging accounts that started from ${dayInWords(since)} on against those before`,
    subgroupSize !== undefined && `, in subgroups of ${subgroupSize}`,
    baseline !== undefined && `, with a baseline of ${baseline} points`,
    settleDays !== undefined && `, allowing ${settleDays} days for late cancellations`,
    asOf !== undefined && `, with data through ${dayInWords(asOf)}`,
    '?',
  ];
  return parts.filter(Boolean).join('');
}
