import type { Period } from '../../../charts/reconcile/ways.ts';
import { MONTHS } from '../../../days.ts';
import { count } from '../../words/format.ts';
import type { Candidate } from './findings.ts';

/** "March 2025"; months are numbered from January of year 0. */
export function monthWords(month: number): string {
  return `${MONTHS[month % 12]} ${Math.floor(month / 12)}`;
}

export function periodWords({ kind, first, last }: Period): string {
  switch (kind) {
    case 'month':
      return monthWords(first);
    case 'quarter':
      return `${MONTHS[first % 12]} to ${monthWords(last)}`;
    case 'year':
      return `the 12 months to ${monthWords(last)}`;
    case 'all':
      return `all ${last - first + 1} complete months to ${monthWords(last)}`;
  }
}

/** What was calculated, in words that say what is divided by what. */
export function wayWords({ way, period, tenure }: Candidate): string {
  const when = period ? periodWords(period) : '';
  const its = period?.kind === 'all' || period?.kind === 'year' ? 'their' : 'its';
  switch (way) {
    case 'over-start':
      return `lost in ${when}, over the customers at ${its} start`;
    case 'of-start':
      return `lost in ${when} among the customers at ${its} start, over those customers`;
    case 'over-average':
      return `lost in ${when}, over the average of the customers at ${its} start and at ${its} end`;
    case 'over-start-plus-new':
      return `lost in ${when}, over the customers at ${its} start plus those who joined`;
    case 'mean-of-months':
      return `the mean of the monthly rates of ${when}`;
    case 'pooled-months':
      return `lost in ${when}, over the customers at the start of each month added up`;
    case 'times-to-year':
      return `${period?.kind === 'month' ? `lost in ${when} over the customers at its start` : `the mean monthly rate of ${when}`}, times twelve`;
    case 'compounded-to-year':
      return `${period?.kind === 'month' ? `lost in ${when} over the customers at its start` : `the mean monthly rate of ${when}`}, compounded to a year`;
    case 'census':
      return `the equal-tenure census at ${tenure ?? ''}, those lost by then over all accounts that have had that long`;
  }
}

/** " (41 of 1,775 accounts)", or nothing where no two counts are divided. */
export function outOf({ lost, over }: Candidate): string {
  return lost === null || over === null ? '' : ` (${count(lost)} of ${count(over)} accounts)`;
}

/** A rate with so many decimals of a percentage. */
export function percentWith(rate: number, decimals: number): string {
  return `${(rate * 100).toFixed(Math.min(decimals, 6))} %`;
}
