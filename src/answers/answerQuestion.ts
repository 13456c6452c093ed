import { checkAsOf } from '../accounts/checkAsOf.ts';
import type { AccountTable } from '../accounts/types.ts';
import { takeCensus } from '../census/census.ts';
import { planCensus } from '../census/plan.ts';
import { tenureInWords } from '../census/tenure.ts';
import type { Census } from '../census/types.ts';
import { type Day, dayInWords } from '../days.ts';
import { EbbError } from '../errors.ts';
import type { Question } from '../requests/types.ts';
import { chartAndJudge, isSubgroupKind } from '../verdict/chartAndJudge.ts';
import type { VerdictContext } from '../verdict/context.ts';
import { LEAST_POINTS } from '../verdict/judgement.ts';
import type { PointDates, Verdict } from '../verdict/types.ts';
import { writeVerdict } from '../verdict/verdict.ts';
import { capitalised, counted } from '../verdict/words/format.ts';
import { emptyJudgement } from './emptyJudgement.ts';
import { pictureOf } from './pictureOf.ts';
import { readCautions } from './readCautions.ts';
import type { Answer } from './types.ts';

export interface AnswerOptions {
  /** what the picture calls the data: the export's name */
  readonly subject: string;
  readonly picture: boolean;
  /** a clock in milliseconds, for the timing figures only */
  readonly clock: () => number;
  /** time already spent on reading */
  readonly readMs: number;
}

/**
 * Answers "has churn moved?" from accounts ready to be counted.
 * @throws EbbError SEGMENT_UNKNOWN, OPTION_INVALID when the question asks for what the data does not have
 */
export async function answerQuestion(table: AccountTable, question: Question, options: AnswerOptions): Promise<Answer> {
  const { clock } = options;
  const begun = clock();
  const { report } = table;
  const asOf = question.asOf ?? report.asOf;
  checkAsOf(asOf, report.inferredAsOf);
  const settleDays = question.settleDays ?? 0;
  const segment = question.segment === undefined ? undefined : knownSegment(table, question.segment);
  const narrowed = segment === undefined ? {} : { segment };

  // A group is read at the age of all accounts, so that the two figures can be compared.
  const tenureOfAll =
    segment === undefined || question.tenure ? undefined : (await planCensus(table, { asOf, settleDays })).tenure;
  const asked = question.tenure ?? tenureOfAll;
  const plan = await planCensus(table, {
    asOf,
    settleDays,
    ...(asked ? { tenure: asked } : {}),
    ...(question.subgroupSize ? { subgroupSize: question.subgroupSize } : {}),
    ...narrowed,
  });
  const { tenure } = plan;
  const census = await takeCensus(table, {
    tenure,
    subgroupSize: plan.subgroupSize,
    settleDays,
    asOf,
    view: 'start',
    ...narrowed,
  });
  const censusDone = clock();

  const dates: PointDates[] = census.subgroups.map(({ firstStart, lastStart, asOf: day }) => ({
    firstStart,
    lastStart,
    asOf: day,
  }));
  const { baseline, caution } = chooseBaseline(question, census);
  const { chart, judgement } =
    census.subgroups.length > 0
      ? chartAndJudge({
          counts: census.subgroups,
          segments: census.segments,
          ...baseline,
          ...(isSubgroupKind(question.chart) ? { kind: question.chart } : {}),
        })
      : { chart: null, judgement: emptyJudgement() };
  const tenureWords = tenureInWords(tenure);
  const context: VerdictContext = {
    tenure: tenureWords,
    dates,
    subgroupSize: plan.subgroupSize,
    accounts: report.accounts,
    matured: census.matured,
    waiting: census.waiting,
    immature: census.immature,
    nextPointOn: census.nextPointOn,
    maturedOn: (accounts) => maturedOn(census, accounts),
    inflowPerWeek: census.inflowPerWeek,
    asOf,
    asOfInferred: question.asOf === undefined && report.asOfSource !== 'given',
    segmentColumn: report.columns.segment ?? null,
    segment: segment ?? null,
    segmentValues: census.segments.map((entry) => entry.segment),
    howChosen: [
      ...(question.tenure
        ? []
        : [
            tenureOfAll
              ? `Read at ${tenureInWords(tenureOfAll)}, the age taken for all accounts.`
              : `${capitalised(plan.tenureWhy)}.`,
          ]),
      ...(question.subgroupSize ? [] : [`${capitalised(plan.sizeWhy)}.`]),
    ],
    readCautions: [...caution, ...readCautions(report, asOf)],
  };
  const verdict = withSince(writeVerdict(chart, judgement, context), question.since);
  const chartDone = clock();

  const picture = options.picture
    ? await pictureOf(
        { chart, dates, judgement, verdict },
        {
          waiting: { accounts: census.waiting, of: plan.subgroupSize, on: census.nextPointOn },
          immature: census.immature,
          measure: `lost within ${tenureWords} of starting`,
          subject: segment === undefined ? options.subject : `${options.subject}, ${segment}`,
          asOf,
        },
      )
    : null;
  const done = clock();
  return {
    verdict,
    chart,
    dates,
    signals: judgement.signals,
    trust: judgement.trust,
    report,
    census,
    plan,
    tenure,
    picture,
    timing: {
      readMs: options.readMs,
      censusMs: censusDone - begun,
      chartMs: chartDone - censusDone,
      pictureMs: done - chartDone,
      totalMs: options.readMs + done - begun,
    },
  };
}

/** When somebody asked "since when", and the chart dates the move earlier, it says so. */
function withSince(verdict: Verdict, since: Day | undefined): Verdict {
  const start = verdict.since?.start ?? null;
  if (since === undefined || start === null || start >= since) return verdict;
  const earlier = `You asked about accounts since ${dayInWords(since)}; the chart itself dates the move earlier, to about ${dayInWords(start)}.`;
  return { ...verdict, cautions: [earlier, ...verdict.cautions] };
}

/** Day on which this many accounts will have matured, from those already started. */
function maturedOn(census: Census, accounts: number): Day | null {
  let sum = census.matured;
  for (const { day, accounts: more } of census.maturing) {
    sum += more;
    if (sum >= accounts) return day;
  }
  return null;
}

/** The baseline the question fixes, if it does, and what to say when it could not be followed. */
function chooseBaseline(
  question: Question,
  census: Census,
): { baseline: { baselineLast?: number }; caution: readonly string[] } {
  const { since } = question;
  if (question.baseline !== undefined)
    return { baseline: { baselineLast: question.baseline }, caution: baselineCaution(question.baseline, census) };
  if (since === undefined) return { baseline: {}, caution: [] };
  const count = census.subgroups.length;
  const before = census.subgroups.filter((subgroup) => subgroup.lastStart < since).length;
  if (before >= LEAST_POINTS && before < count) return { baseline: { baselineLast: before }, caution: [] };
  const why =
    before >= count
      ? `No full point has started since ${dayInWords(since)} yet`
      : `Only ${counted(before, 'full point')} lie before ${dayInWords(since)}, too few to set a usual level`;
  return { baseline: {}, caution: [`${why}, so the usual split of the chart was kept.`] };
}

function baselineCaution(asked: number, census: Census): string[] {
  const points = census.subgroups.length;
  if (asked > points) return [`There are only ${counted(points, 'point')}, so all of them set the usual level.`];
  if (asked < LEAST_POINTS) {
    return [
      `A usual level from ${counted(asked, 'point')} is hardly one: it takes ${LEAST_POINTS} at least, and 25 to be firm.`,
    ];
  }
  return [];
}

function knownSegment(table: AccountTable, wanted: NonNullable<Question['segment']>): string {
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
