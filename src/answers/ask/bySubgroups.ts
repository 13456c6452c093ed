import { takeCensus } from '../../census/census.ts';
import { tenureInWords } from '../../census/tenure.ts';
import type { Census } from '../../census/types.ts';
import { type Day, dayInWords } from '../../days.ts';
import type { Scope } from '../../requests/types.ts';
import { chartAndJudge, isSubgroupKind } from '../../verdict/chartAndJudge.ts';
import type { VerdictContext } from '../../verdict/context.ts';
import { LEAST_POINTS } from '../../verdict/judgement.ts';
import type { PointDates, Verdict } from '../../verdict/types.ts';
import { writeVerdict } from '../../verdict/verdict.ts';
import { capitalised, counted } from '../../verdict/words/format.ts';
import { drawnFrom } from '../drawnFrom.ts';
import { emptyJudgement } from '../emptyJudgement.ts';
import { readCautions } from '../readCautions.ts';
import type { AskContext, Reached } from './types.ts';

/** The usual way: the share lost by the tenure point in equal subgroups in order of start, on a p chart or a p' chart. */
export async function bySubgroups(context: AskContext): Promise<Reached> {
  const { table, question, scope, resolved } = context;
  const { plan, tenureOfAll } = resolved;
  const { report } = table;
  const { tenure } = plan;
  const census = await takeCensus(table, { tenure, subgroupSize: plan.subgroupSize, view: 'start', ...scope });
  const countedAt = context.clock();

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
  const verdictContext: VerdictContext = {
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
    asOf: scope.asOf,
    asOfInferred: question.asOf === undefined && report.asOfSource !== 'given',
    segmentColumn: report.columns.segment ?? null,
    segment: scope.segment ?? null,
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
    readCautions: [...caution, ...readCautions(report, scope.asOf)],
  };
  const verdict = withSince(writeVerdict(chart, judgement, verdictContext), question.since);
  return {
    verdict,
    chart,
    dates,
    signals: judgement.signals,
    trust: judgement.trust,
    judgement,
    census,
    plan,
    drawn: {
      ...drawnFrom(judgement),
      waiting: { accounts: census.waiting, of: plan.subgroupSize, on: census.nextPointOn },
      immature: census.immature,
      measure: `lost within ${tenureWords} of starting`,
      subject: scope.segment === undefined ? context.subject : `${context.subject}, ${scope.segment}`,
      asOf: scope.asOf,
    },
    countedAt,
  };
}

/** When somebody asked "since when", and the chart dates the move earlier, it says so. */
export function withSince(verdict: Verdict, since: Day | undefined): Verdict {
  const start = verdict.since?.start ?? null;
  if (since === undefined || start === null || start >= since) return verdict;
  const earlier = `You asked about accounts since ${dayInWords(since)}; the chart itself dates the move earlier, to about ${dayInWords(start)}.`;
  return { ...verdict, cautions: [earlier, ...verdict.cautions] };
}

/** Day on which this many accounts will have matured, from those already started. */
export function maturedOn(census: Census, accounts: number): Day | null {
  let sum = census.matured;
  for (const { day, accounts: more } of census.maturing) {
    sum += more;
    if (sum >= accounts) return day;
  }
  return null;
}

/** The baseline the question fixes, if it does, and what to say when it could not be followed. */
export function chooseBaseline(
  question: Scope,
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
