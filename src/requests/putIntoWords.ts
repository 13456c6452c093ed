import type { Tenure } from '../census/types.ts';
import { type Day, dayInWords } from '../days.ts';
import { moveInWords } from './movePhrase.ts';
import type { Question, Request, Scope, SideQuestion } from './types.ts';
import { chartInWords } from './viewPhrase.ts';
import { weeklyInWords } from './weeklyPhrase.ts';

/** An age in words: "6 months", "1 week". */
export function tenureInWords(tenure: Tenure): string {
  return `${tenure.count} ${tenure.unit}${tenure.count === 1 ? '' : 's'}`;
}

/**
 * A request put back into words, complete: understanding these words gives the same request again (`tests`, which are options, apart).
 * @example putIntoWords({ kind: 'ask', tenure: { count: 6, unit: 'month' } }) // 'has churn at 6 months moved?'
 */
export function putIntoWords(request: Request): string {
  if (request.kind === 'help') return 'help';
  if (request.kind === 'data') return 'what did you read?';
  if (request.kind === 'weekly-show') return 'when do you post?';
  if (request.kind === 'weekly-stop')
    return `stop the weekly post${request.which === null ? 's' : ` ${request.which}`}`;
  if (request.kind === 'weekly-set') return `${weeklyInWords(request.time)}: ${putIntoWords(request.question)}`;
  return `${opening(request)}${scopeInWords(request)}${CLOSING[request.kind] ?? ''}`;
}

const CLOSING: Partial<Record<Request['kind'], string>> = {
  ask: '?',
  where: '?',
  revenue: '?',
  plan: '?',
  target: '?',
};

function opening(request: Question | SideQuestion): string {
  const age = request.tenure ? ` at ${tenureInWords(request.tenure)}` : '';
  switch (request.kind) {
    case 'ask':
      return `has churn${age} moved`;
    case 'where':
      return `where has churn${age} moved`;
    case 'revenue':
      return `has revenue churn${age} moved`;
    case 'plan': {
      const seen = request.move === undefined ? '' : `, to see ${moveInWords(request.move)}`;
      return `how should we count churn${age}${seen}${request.within === undefined ? '' : `, within ${request.within} points`}`;
    }
    case 'early':
      return `early watch${age}${request.move === undefined ? '' : `, for ${moveInWords(request.move)}`}${
        request.to === undefined ? '' : `, for a move to ${percentInWords(request.to)}`
      }`;
    case 'reconcile':
      return `reconcile ${percentInWords(request.rate, request.decimals)}${
        request.month === undefined ? '' : ` for ${monthInWords(request.month)}`
      }${age && `, read${age}`}`;
    case 'worth':
      return `what is an account worth${age}`;
    case 'target':
      return `is a target of ${percentInWords(request.rate)} met${age}`;
    case 'spread':
      return `spread of the points${age}`;
    case 'explain':
      return `explain the verdict${age}`;
  }
}

function scopeInWords({ segment, since, subgroupSize, baseline, settleDays, asOf, view, chart }: Scope): string {
  const parts = [
    segment &&
      (segment.column === undefined ? ` for “${segment.value}”` : ` where ${segment.column} is “${segment.value}”`),
    since !== undefined && `, judging accounts that started from ${dayInWords(since)} on against those before`,
    subgroupSize !== undefined && `, in subgroups of ${subgroupSize}`,
    baseline !== undefined && `, with a baseline of ${baseline} points`,
    view === 'calendar' && ', by calendar month',
    view === 'renewal' && ', by renewal date',
    chart !== undefined && `, with ${chartInWords(chart)}`,
    settleDays !== undefined && `, allowing ${settleDays} days for late cancellations`,
    asOf !== undefined && `, with data through ${dayInWords(asOf)}`,
  ];
  return parts.filter(Boolean).join('');
}

/** "14.2 %": as many decimals as were given, or as many as it takes. */
function percentInWords(rate: number, decimals?: number): string {
  const percent = Number((rate * 100).toPrecision(12));
  return `${decimals === undefined ? percent : percent.toFixed(decimals)} %`;
}

/** "March 2025" */
function monthInWords(day: Day): string {
  return dayInWords(day).replace(/^\S+ /, '');
}
