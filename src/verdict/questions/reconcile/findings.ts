import type { FlowCell } from '../../../charts/reconcile/flows.ts';
import { type Matched, matchFigures, type ReportedFigure, reportedFigure } from '../../../charts/reconcile/match.ts';
import { type Period, periodsOf, type WayKind, waysOf } from '../../../charts/reconcile/ways.ts';

/** One computed figure that the reported one may be. */
export interface Candidate {
  readonly way: WayKind | 'census';
  readonly value: number;
  /** what is divided by what, in accounts; null for means of rates and what is taken to a year */
  readonly lost: number | null;
  readonly over: number | null;
  /** null for the census, which knows no months */
  readonly period: Period | null;
  /** of the census: "3 months" */
  readonly tenure: string | null;
}

/** A month somebody named: complete in the data, not over yet or after it, or before anybody was a customer. */
export type NamedMonth =
  | { readonly kind: 'complete'; readonly month: number }
  | { readonly kind: 'incomplete'; readonly month: number }
  | { readonly kind: 'before'; readonly month: number };

export interface ReconcileFindings {
  readonly reported: ReportedFigure;
  readonly decimals: number;
  readonly named: NamedMonth | null;
  /** all figures tried, those that are asked about first */
  readonly candidates: readonly Candidate[];
  readonly matched: Matched<Candidate>;
  /** the equal-tenure census at the tenure "has churn moved?" reads; null when nobody has got that far */
  readonly census: Candidate | null;
  /** complete months; null when there is none */
  readonly months: { readonly first: number; readonly last: number } | null;
}

export interface ReconcileFacts {
  readonly rate: number;
  readonly decimals: number;
  readonly month: number | null;
  readonly cells: readonly FlowCell[];
  readonly firstMonth: number;
  readonly lastMonth: number;
  /** the census at several tenures, the usual one first */
  readonly shares: readonly { readonly tenure: string; readonly accounts: number; readonly lost: number }[];
}

/** Works out every common way over every period that makes sense, and which of them is the reported figure. */
export function reconcile(facts: ReconcileFacts): ReconcileFindings {
  const { rate, decimals, month, cells, firstMonth, lastMonth } = facts;
  const named = month === null ? null : namedMonth(month, firstMonth, lastMonth);
  const periods = periodsOf(firstMonth, lastMonth, named?.kind === 'complete' ? named.month : undefined);
  const ways = periods.map((period) => waysOf(cells, period).map((figure): Candidate => ({ ...figure, tenure: null })));
  const census = facts.shares.flatMap(({ tenure, accounts, lost }): Candidate[] =>
    accounts === 0 ? [] : [{ way: 'census', value: lost / accounts, lost, over: accounts, period: null, tenure }],
  );
  // The other months of the last twelve come last: they are tried, but nobody asked about them.
  const main = periods.filter(({ kind }, i) => kind !== 'month' || i === 0).length;
  const order = periods.map((_, i) => i).sort((a, b) => rank(periods, a) - rank(periods, b));
  const sorted = order.map((i) => ways[i] ?? []);
  const candidates = [...sorted.slice(0, main).flat(), ...census, ...sorted.slice(main).flat()];
  const reported = reportedFigure(rate, decimals);
  return {
    reported,
    decimals,
    named,
    candidates,
    matched: matchFigures(candidates, reported),
    census: facts.shares[0] && facts.shares[0].accounts > 0 ? (census[0] ?? null) : null,
    months: lastMonth >= firstMonth && cells.length > 0 ? { first: firstMonth, last: lastMonth } : null,
  };
}

function namedMonth(month: number, firstMonth: number, lastMonth: number): NamedMonth {
  if (month > lastMonth) return { kind: 'incomplete', month };
  return { kind: month < firstMonth ? 'before' : 'complete', month };
}

/** The first period, then the longer ones, then the other months, each in the order given. */
function rank(periods: readonly Period[], i: number): number {
  return i === 0 ? 0 : (periods[i]?.kind === 'month' ? 1000 : 1) + i;
}
