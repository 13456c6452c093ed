import { takeCensus } from '../../census/census.ts';
import { lossDays } from '../../census/lossDays.ts';
import { lossPlaces } from '../../census/lossPlaces.ts';
import { tenureInWords, tenurePoint } from '../../census/tenure.ts';
import type { Census } from '../../census/types.ts';
import { dayInWords } from '../../days.ts';
import { EbbError } from '../../errors.ts';
import { writeGapVerdict } from '../../verdict/gaps/gapVerdict.ts';
import { judgeGaps } from '../../verdict/gaps/judgeGaps.ts';
import type { GapContext } from '../../verdict/gaps/types.ts';
import { LEAST_POINTS } from '../../verdict/judgement.ts';
import type { PointDates } from '../../verdict/types.ts';
import { count, counted } from '../../verdict/words/format.ts';
import { gapsDrawn } from '../gapsDrawn.ts';
import { readCautions } from '../readCautions.ts';
import { tenureChosen } from './howChosen.ts';
import { rareLosses } from './rareLosses.ts';
import type { AskContext, Reached, Way } from './types.ts';

/** More gaps than this are no rare losses, and cannot be told apart in a picture. Our choice, no source. */
export const MOST_GAPS = 500;

/** What a way of counting gaps hands on: the gaps, the days they lie between, and what was looked at. */
type Gaps = Pick<GapContext, 'dates' | 'open' | 'accounts' | 'watched'> & { readonly gaps: readonly number[] };

/**
 * g chart: accounts kept from one loss to the next, matured accounts in order of start.
 * @param why  the beginning of a sentence on why this chart, when nobody asked for it
 */
export function byLossesInOrder(why?: string): Way {
  return async (context) => reachedFrom(context, 'g', await inOrder(context), why);
}

/** t chart: days from one loss to the next. */
export const byLossesInTime: Way = async (context) => reachedFrom(context, 't', await inTime(context));

async function inOrder(context: AskContext): Promise<Gaps> {
  const { table, scope, resolved } = context;
  const { tenure } = resolved.plan;
  const { accounts, places, startOf } = await lossPlaces(table, { tenure, ...scope }, 0);
  if (places.length > MOST_GAPS) throw notRare(places.length);
  const gaps: number[] = [];
  const dates: PointDates[] = [];
  let previous = 0;
  for (const place of places) {
    gaps.push(place - previous - 1);
    const lastStart = startOf(place);
    dates.push({
      firstStart: startOf(previous + 1),
      lastStart,
      asOf: tenurePoint(lastStart, tenure) + scope.settleDays,
    });
    previous = place;
  }
  const open = accounts - previous;
  if (open > 0) dates.push({ firstStart: startOf(previous + 1), lastStart: startOf(accounts), asOf: scope.asOf });
  return { gaps, open, dates, accounts, watched: null };
}

async function inTime({ table, scope, resolved }: AskContext): Promise<Gaps> {
  const found = await lossDays(table, { tenure: resolved.plan.tenure, ...scope }, MOST_GAPS);
  if (found === null) return { gaps: [], open: 0, dates: [], accounts: 0, watched: null };
  const { days, from, to } = found;
  if (days.length > MOST_GAPS) throw notRare(null);
  const begins = [from, ...days];
  return {
    gaps: days.map((day, i) => day - begins[i]!),
    open: to - begins.at(-1)!,
    dates: [...days, to].map((day, i) => ({ firstStart: begins[i]!, lastStart: day, asOf: day })),
    accounts: null,
    watched: { from, to },
  };
}

function notRare(losses: number | null): EbbError {
  return new EbbError(
    'OPTION_INVALID',
    `a chart of the gaps between losses is for rare losses, and here are ${losses === null ? `more than ${count(MOST_GAPS)}` : count(losses)} of them`,
    'Leave the chart out, and losses are counted per group of accounts (a p chart).',
  );
}

async function reachedFrom(context: AskContext, kind: 'g' | 't', found: Gaps, why?: string): Promise<Reached> {
  const { table, question, scope, resolved } = context;
  const { plan } = resolved;
  const { report } = table;
  const { tenure } = plan;
  const counts = await takeCensus(table, { tenure, subgroupSize: plan.subgroupSize, view: 'start', ...scope });
  const countedAt = context.clock();
  const { baseline, caution } = chooseBaseline(context, found);
  const common =
    why === undefined && question.subgroupSize === undefined && plan.rate > 0 && (await rareLosses(context)) === null
      ? [
          'Losses are not rare here. This chart takes its usual level from the first few dozen of them, a short stretch of time, and jumps about; a p chart, which is drawn when no kind is named, rests on far more accounts. Where the two differ, go by that one.',
        ]
      : [];
  const judgement = judgeGaps({
    kind,
    gaps: found.gaps,
    open: found.open,
    ...baseline,
    ...(question.tests ? { tests: question.tests } : {}),
  });
  const tenureWords = tenureInWords(tenure);
  const gapContext: GapContext = {
    kind,
    tenure: tenureWords,
    dates: found.dates,
    losses: found.gaps.length,
    open: found.open,
    accounts: found.accounts,
    watched: found.watched,
    immature: counts.immature,
    inflowPerWeek: counts.inflowPerWeek,
    asOf: scope.asOf,
    asOfInferred: question.asOf === undefined && report.asOfSource !== 'given',
    segment: scope.segment ?? null,
    whyThisChart: [why === undefined ? `As asked, ${EACH_POINT[kind]}.` : `${why} ${EACH_POINT[kind]}.`],
    howChosen: tenureChosen(question, resolved),
    readCautions: [...common, ...caution, ...readCautions(report, scope.asOf)],
  };
  const verdict = writeGapVerdict(judgement, gapContext);
  return {
    verdict,
    chart: judgement.chart,
    dates: found.dates,
    signals: judgement.signals,
    trust: judgement.trust,
    judgement: null,
    census: withoutSubgroups(counts, judgement.chart?.points.at(-1)?.open ? 0 : found.open),
    plan,
    drawn: gapsDrawn(judgement, gapContext, {
      measure:
        kind === 'g'
          ? `accounts kept from one loss to the next (lost within ${tenureWords} of starting)`
          : `days from one loss to the next (lost within ${tenureWords} of starting)`,
      subject: scope.segment === undefined ? context.subject : `${context.subject}, ${scope.segment}`,
    }),
    countedAt,
  };
}

const EACH_POINT = {
  g: 'each point is the number of accounts kept from one loss to the next (a g chart): the longer the gap, the fewer are lost',
  t: 'each point is the number of days from one loss to the next (a t chart): the longer the gap, the fewer are lost',
} as const;

/** The counts of the census without its subgroups: nothing is cut here, and what waits is what came since the last loss. */
function withoutSubgroups(census: Census, waiting: number): Census {
  return { ...census, subgroups: [], segments: [], waiting, nextPointOn: null };
}

/** The baseline the question fixes, if it does, and what to say when it could not be followed. */
function chooseBaseline(
  { question }: AskContext,
  { gaps, dates }: Gaps,
): { baseline: { baselineLast?: number }; caution: readonly string[] } {
  const { baseline, since } = question;
  if (gaps.length === 0) return { baseline: {}, caution: [] };
  if (baseline !== undefined) {
    const caution =
      baseline > gaps.length
        ? [`There are only ${counted(gaps.length, 'gap')}, so all of them set the usual level.`]
        : baseline < LEAST_POINTS
          ? [
              `A usual level from ${counted(baseline, 'gap')} is hardly one: it takes ${LEAST_POINTS} at least, and 25 to be firm.`,
            ]
          : [];
    return { baseline: { baselineLast: Math.min(baseline, gaps.length) }, caution };
  }
  if (since === undefined) return { baseline: {}, caution: [] };
  const before = gaps.filter((_, i) => dates[i]!.lastStart! < since).length;
  if (before >= LEAST_POINTS && before < gaps.length) return { baseline: { baselineLast: before }, caution: [] };
  const why =
    before >= gaps.length
      ? `No gap has ended since ${dayInWords(since)} yet`
      : `Only ${counted(before, 'gap')} lie before ${dayInWords(since)}, too few to set a usual level`;
  return { baseline: {}, caution: [`${why}, so the usual split of the chart was kept.`] };
}
