import { type Flow, type FlowCell, flow } from './flows.ts';

/*
 * The common ways of getting a churn figure, each from the same counts. There is no source that owns them: all are in use, under one name.
 */
export type WayKind =
  /** lost in the period over the customers at its start */
  | 'over-start'
  /** the same, without those who joined and left within the period */
  | 'of-start'
  /** over the mean of the customers at the start and at the end */
  | 'over-average'
  /** over the customers at the start and those who joined */
  | 'over-start-plus-new'
  /** plain mean of the monthly rates (lost over the customers at the start of each month) */
  | 'mean-of-months'
  /** lost in all months over the customers at the starts of all months: the mean of the monthly rates weighted by customers */
  | 'pooled-months'
  /** a monthly rate multiplied up to a year */
  | 'times-to-year'
  /** a monthly rate compounded to a year: 1 - (1 - m)^12 */
  | 'compounded-to-year';

/** A run of whole months a figure can be about. */
export interface Period {
  readonly kind: 'month' | 'quarter' | 'year' | 'all';
  readonly first: number;
  readonly last: number;
}

export interface WayFigure {
  readonly way: WayKind;
  readonly period: Period;
  /** a fraction; above 1 only when multiplied up */
  readonly value: number;
  /** what is divided by what: accounts, for a mean of monthly rates null */
  readonly lost: number | null;
  readonly over: number | null;
}

const MONTHS_A_YEAR = 12;

/**
 * Every way that makes sense for a period, leaving out those that would divide by nobody.
 * A single month has no mean of months; a period of twelve months or more is a year's figure already, of which only its monthly rate is
 * taken to a year.
 */
export function waysOf(cells: readonly FlowCell[], period: Period): WayFigure[] {
  const whole = flow(cells, period.first, period.last);
  const months: Flow[] = [];
  for (let month = period.first; month <= period.last; month++) months.push(flow(cells, month, month));
  const figures: WayFigure[] = [];
  const ratio = (way: WayKind, lost: number, over: number): void => {
    if (over > 0) figures.push({ way, period, value: lost / over, lost, over });
  };
  ratio('over-start', whole.lost, whole.start);
  ratio('of-start', whole.lostOfStart, whole.start);
  ratio('over-average', whole.lost, (whole.start + whole.end) / 2);
  ratio('over-start-plus-new', whole.lost, whole.start + whole.added);
  const open = months.filter(({ start }) => start > 0);
  if (open.length === 0) return figures;
  const monthly = open.reduce((sum, { lost, start }) => sum + lost / start, 0) / open.length;
  const alone = (way: WayKind, value: number): void => {
    figures.push({ way, period, value, lost: null, over: null });
  };
  if (months.length > 1) {
    alone('mean-of-months', monthly);
    ratio(
      'pooled-months',
      open.reduce((sum, { lost }) => sum + lost, 0),
      open.reduce((sum, { start }) => sum + start, 0),
    );
  }
  alone('times-to-year', MONTHS_A_YEAR * monthly);
  if (monthly <= 1) alone('compounded-to-year', 1 - (1 - monthly) ** MONTHS_A_YEAR);
  return figures;
}

/**
 * The periods a figure may be about: the month it was said to be for, with its quarter and the twelve months to its end; else the last
 * complete month, quarter (of the calendar) and twelve months; all complete months; and each of the last twelve.
 * @param firstMonth  first whole month there are customers in
 * @param lastMonth   last complete month
 * @param named       a month somebody named; ignored when it is not among the complete ones
 * @returns           without repetition, those that are asked about first
 */
export function periodsOf(firstMonth: number, lastMonth: number, named?: number): Period[] {
  if (lastMonth < firstMonth) return [];
  const about = named !== undefined && named >= firstMonth && named <= lastMonth ? named : undefined;
  const periods: Period[] = [];
  const add = (kind: Period['kind'], first: number, last: number): void => {
    if (first < firstMonth || last > lastMonth || periods.some((one) => one.first === first && one.last === last))
      return;
    periods.push({ kind, first, last });
  };
  // Months are counted from January of some year, so that quarters begin at multiples of three.
  const quarterFrom = (month: number): number => Math.floor(month / 3) * 3;
  for (const month of about === undefined ? [] : [about]) {
    add('month', month, month);
    add('quarter', quarterFrom(month), quarterFrom(month) + 2);
    add('year', month - 11, month);
  }
  add('month', lastMonth, lastMonth);
  const lastQuarter = quarterFrom(lastMonth + 1) - 3;
  add('quarter', lastQuarter, lastQuarter + 2);
  add('year', lastMonth - 11, lastMonth);
  add('all', firstMonth, lastMonth);
  for (let month = lastMonth - 1; month > lastMonth - 12; month--) add('month', month, month);
  return periods;
}
