import type { ReadReport } from '../accounts/types.ts';
import type { Answer } from '../answers/types.ts';
import { type Day, isoDay } from '../days.ts';

const iso = (day: Day | null | undefined): string | null => (day === null || day === undefined ? null : isoDay(day));

/** The answer as the one JSON object other programs read; its names stay as they are. Rates are fractions, dates ISO 8601 days. */
export function contractJson(answer: Answer): Record<string, unknown> {
  const { verdict, chart, report, census, timing } = answer;
  return {
    verdict: {
      ...verdict,
      since: verdict.since ? { ...verdict.since, start: iso(verdict.since.start) } : null,
      difference: verdict.difference,
    },
    chart: {
      kind: chart?.kind ?? 'p',
      view: census?.request.view ?? 'start',
      sigmaZ: chart?.sigmaZ ?? 1,
      subgroupSize: chart ? chart.subgroupSize : sizeAsked(answer),
      // What `value`, `center` and the limits are: fractions, accounts, days, or numbers of the asker's own.
      scale: chart?.scale ?? 'rate',
      center: chart?.center ?? null,
      ...(chart?.mean === undefined ? {} : { mean: chart.mean }),
      baseline: chart ? chart.baseline : null,
      points: (chart?.points ?? []).map((point, i) => ({
        ...point,
        firstStart: iso(answer.dates[i]?.firstStart),
        lastStart: iso(answer.dates[i]?.lastStart),
        asOf: iso(answer.dates[i]?.asOf),
        restated: false,
      })),
      signals: answer.signals,
    },
    trust: answer.trust,
    data: report
      ? {
          ...readJson(report),
          matured: census?.matured ?? 0,
          waiting: census?.waiting ?? 0,
          immature: census?.immature ?? 0,
          asOf: iso(census?.request.asOf ?? report.asOf),
          // A calendar month has no age to read at.
          tenure: census?.request.view === 'calendar' ? null : answer.tenure,
          nextPointOn: iso(census?.nextPointOn),
        }
      : null,
    // What was recommended for a size and an age plays no part in calendar months.
    plan: census?.request.view === 'calendar' ? null : answer.plan,
    timing,
  };
}

/** What was read, for the `data` part of any answer's JSON. */
export function readJson(report: ReadReport): Record<string, unknown> {
  const { rows, accounts, returned, mergedRows, asOfSource, rejected, columns, dates, segments } = report;
  return {
    rows,
    accounts,
    returned,
    mergedRows,
    asOf: iso(report.asOf),
    asOfSource,
    rejected,
    columns,
    dates,
    segments,
  };
}

/** Accounts a point before there is one; months have no size of their own. */
function sizeAsked({ census }: Answer): number | null {
  return census === null || census.request.view === 'calendar' ? null : census.request.subgroupSize;
}

const POINT_COLUMNS = ['index', 'accounts', 'lost', 'value', 'sigma', 'lower', 'upper'] as const;
/** Beside the three sigma limits, where the chart has them: empty on other kinds. */
const EXACT_COLUMNS = ['exactLower', 'exactUpper'] as const;

/** The points as CSV, one line each, for a spreadsheet. */
export function pointsCsv(answer: Answer): string {
  const header = [...POINT_COLUMNS, 'firstStart', 'lastStart', 'asOf', ...EXACT_COLUMNS].join(',');
  const rows = (answer.chart?.points ?? []).map((point, i) => {
    const dates = answer.dates[i];
    return [
      ...POINT_COLUMNS.map((name) => point[name]),
      iso(dates?.firstStart) ?? '',
      iso(dates?.lastStart) ?? '',
      iso(dates?.asOf) ?? '',
      ...EXACT_COLUMNS.map((name) => point[name] ?? ''),
    ].join(',');
  });
  return `${[header, ...rows].join('\n')}\n`;
}
