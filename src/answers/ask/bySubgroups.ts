import { takeCensus } from '../../census/census.ts';
import { tenureInWords } from '../../census/tenure.ts';
import type { Census, CensusPlan } from '../../census/types.ts';
import { type Day, dayInWords } from '../../days.ts';
import type { Scope } from '../../requests/types.ts';
import { chartAndJudge, isSubgroupKind } from '../../verdict/chartAndJudge.ts';
import type { VerdictContext } from '../../verdict/context.ts';
import { LEAST_POINTS } from '../../verdict/judgement.ts';
import type { PictureInput, PointDates, Verdict } from '../../verdict/types.ts';
import { writeVerdict } from '../../verdict/verdict.ts';
import { counted } from '../../verdict/words/format.ts';
import { chosenTests } from '../../verdict/words/testWords.ts';
import { type ViewWords, viewWords } from '../../verdict/words/viewWords.ts';
import { drawnFrom } from '../drawnFrom.ts';
import { emptyJudgement } from '../emptyJudgement.ts';
import { readCautions } from '../readCautions.ts';
import { howChosen } from './howChosen.ts';
import type { AskContext, Reached } from './types.ts';

/** With the usual smoothing, a weight of 0.1. */
const SMOOTHED =
  'Each point shows the smoothed share, a tenth its own and nine tenths the smoothed share before it (an EWMA chart): small lasting moves add up, single points count little.';

/** The usual way: the share lost by the tenure point in equal subgroups in order of start, on a p chart or a p' chart. */
export async function bySubgroups(context: AskContext): Promise<Reached> {
  const { table, scope, resolved } = context;
  const { tenure, subgroupSize } = resolved.plan;
  const census = await takeCensus(table, { tenure, subgroupSize, view: 'start', ...scope });
  return answerCensus(context, inOrderOfStart(context, census));
}

/** The census in order of start, with what must be said about it. */
export function inOrderOfStart({ question, resolved, clock }: AskContext, census: Census): Counted {
  const { plan } = resolved;
  return {
    census,
    plan,
    tenure: tenureInWords(plan.tenure),
    countedAt: clock(),
    howChosen: howChosen(question, resolved),
    waiting: { accounts: census.waiting, of: plan.subgroupSize, on: census.nextPointOn },
  };
}

/** What was counted in one view of the census, and what must be said about it. */
export interface Counted {
  readonly census: Census;
  readonly plan: CensusPlan;
  /** the age or the time between renewals, in words */
  readonly tenure: string;
  readonly countedAt: number;
  readonly howChosen: readonly string[];
  readonly waiting: PictureInput['waiting'];
  /** cautions that the view itself calls for */
  readonly cautions?: readonly string[];
  readonly withheld?: VerdictContext['withheld'];
}

/** Charts and judges the subgroups of a census and puts them into words. */
export function answerCensus(context: AskContext, taken: Counted): Reached {
  const { question, scope } = context;
  const { census, plan, countedAt } = taken;
  const { view } = census.request;
  const words = viewWords(view);

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
          accountsPerWeek: census.inflowPerWeek,
          ...baseline,
          ...(question.tests ? { tests: question.tests } : {}),
          ...(isSubgroupKind(question.chart) ? { kind: question.chart } : {}),
        })
      : { chart: null, judgement: emptyJudgement() };
  const verdictContext = verdictContextOf(context, taken, dates, caution);
  const verdict = withSince(writeVerdict(chart, judgement, verdictContext), question.since, words);
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
      view,
      waiting: taken.waiting,
      immature: census.immature,
      measure: `${words.measure(taken.tenure)}${chart?.smoothing ? ', smoothed' : ''}`,
      subject: scope.segment === undefined ? context.subject : `${context.subject}, ${scope.segment}`,
      asOf: scope.asOf,
    },
    countedAt,
  };
}

/** What the words of a verdict need to know beside the chart. */
export function verdictContextOf(
  { table, question, scope }: AskContext,
  taken: Counted,
  dates: readonly PointDates[],
  caution: readonly string[],
): VerdictContext {
  const { census, plan } = taken;
  const { report } = table;
  const { view } = census.request;
  return {
    view,
    withheld: taken.withheld ?? null,
    tenure: taken.tenure,
    dates,
    subgroupSize: view === 'calendar' ? null : plan.subgroupSize,
    accounts: report.accounts,
    matured: census.matured,
    waiting: census.waiting,
    immature: census.immature,
    nextPointOn: census.nextPointOn,
    maturedOn: (accounts) => maturedOn(census, accounts),
    inflowPerWeek: census.inflowPerWeek,
    asOf: scope.asOf,
    asOfInferred: question.asOf === undefined && report.asOfSource !== 'given',
    // Renewals are grouped by their number; the export's own groups are not compared in that view.
    segmentColumn: view === 'renewal' ? null : (report.columns.segment ?? null),
    segment: scope.segment ?? null,
    segmentValues: census.segments.map((entry) => entry.segment),
    howChosen: [
      ...(question.chart === 'ewma' ? [SMOOTHED] : []),
      ...taken.howChosen,
      ...(question.tests && question.chart !== 'ewma' ? [chosenTests(question.tests)] : []),
    ],
    readCautions: [...caution, ...(taken.cautions ?? []), ...readCautions(report, scope.asOf)],
  };
}

/** When somebody asked "since when", and the chart dates the move earlier, it says so. */
export function withSince(verdict: Verdict, since: Day | undefined, words: ViewWords): Verdict {
  const start = verdict.since?.start ?? null;
  if (since === undefined || start === null || start >= since) return verdict;
  const earlier = `You asked about ${words.one}s since ${dayInWords(since)}; the chart itself dates the move earlier, to about ${words.day(start)}.`;
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
      ? `No full point lies after ${dayInWords(since)} yet`
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
