import type { AccountTable } from '../../accounts/types.ts';
import { OTHER_SEGMENT } from '../../census/censusSql.ts';
import { takeGroupsCensus } from '../../census/groupsCensus.ts';
import { subgroupSizes } from '../../census/sizes.ts';
import { tenureInWords } from '../../census/tenure.ts';
import type { Census, CensusPlan } from '../../census/types.ts';
import { dayInWords } from '../../days.ts';
import { EbbError } from '../../errors.ts';
import { drawPlate } from '../../picture/picture.ts';
import { whereAltText, whereScene } from '../../picture/questions/where.ts';
import type { SideQuestionOf } from '../../requests/types.ts';
import { LEAST_POINTS } from '../../verdict/judgement.ts';
import { changeOf, type Stretches, stretchesOf } from '../../verdict/questions/where/change.ts';
import { type HowToJudge, judgeGroups } from '../../verdict/questions/where/judgeGroups.ts';
import type { GroupReading } from '../../verdict/questions/where/types.ts';
import { whereFigures } from '../../verdict/questions/where/whereFigures.ts';
import { type WhereContext, whereWords } from '../../verdict/questions/where/whereWords.ts';
import { readCautions } from '../readCautions.ts';
import type { Answer } from '../types.ts';
import type { AnswerSide, SideContext } from './types.ts';

/**
 * Where did churn move: every group of the segment column on its own chart, all of them judged together, and the change of all accounts
 * told apart into the groups' rates and their mix.
 * @throws EbbError SEGMENT_UNKNOWN without groups to look at; OPTION_INVALID for what does not go with this question
 */
export const answerWhere: AnswerSide<'where'> = async (context, request) => {
  const { table, scope } = context;
  const column = groupColumn(table);
  checkRequest(request);
  const plan = await context.plan();
  const overall = await context.ask();
  const groups = await takeGroupsCensus(table, {
    tenure: plan.tenure,
    settleDays: scope.settleDays,
    asOf: scope.asOf,
    ...(request.subgroupSize === undefined ? {} : { subgroupSize: request.subgroupSize }),
  });
  const how: HowToJudge = {
    ...(request.chart === 'p' || request.chart === 'p-prime' ? { kind: request.chart } : {}),
    ...(request.tests === undefined ? {} : { tests: request.tests }),
    ...(request.baseline === undefined ? {} : { baseline: request.baseline }),
    ...(request.since === undefined ? {} : { since: request.since }),
  };
  const readings = judgeGroups(groups, column, how);
  const census = overall.census?.request.view === 'start' ? overall.census : await context.census();
  const stretches = stretchesFor(overall, census);
  const words: WhereContext = {
    column,
    tenure: tenureInWords(plan.tenure),
    overall: overall.verdict.headline,
    change: changeOf(namedRest(census.segments, table), stretches),
    stretches: stretches && {
      from: census.subgroups[0]!.firstStart,
      to: census.subgroups[stretches.beforeLast - 1]!.lastStart,
      since: census.subgroups[stretches.first - 1]!.firstStart,
    },
    needed: accountsNeeded(plan),
    cautions: cautionsOf(context, request, readings),
  };
  return {
    kind: 'where',
    ...whereWords(readings, words),
    figures: whereFigures(readings, words, {
      outcome: overall.verdict.outcome,
      headline: overall.verdict.headline,
    }),
    picture: context.picture
      ? await drawPlate(
          whereScene(readings, { column, tenure: words.tenure, subject: context.subject, asOf: scope.asOf }),
          whereAltText(readings, { column, tenure: words.tenure }),
        )
      : null,
  };
};

/** The name of the column whose values are the groups. */
function groupColumn({ report }: AccountTable): string {
  const column = report.columns.segment;
  if (column === undefined) {
    const { segment: _, ...used } = report.columns;
    const free = report.headers.filter((header) => !Object.values(used).includes(header));
    throw new EbbError(
      'SEGMENT_UNKNOWN',
      'the export has no column that groups accounts, so there is no “where” to look at',
      `Name the column that does: in the channel under “Plan or another group”, on the command line with --columns segment=COLUMN.${free.length > 0 ? ` Columns not used yet: ${free.slice(0, 8).join(', ')}.` : ''}`,
    );
  }
  const [only, second] = report.segments;
  const given = report.segments.reduce((sum, { accounts }) => sum + accounts, 0);
  if (only !== undefined && second === undefined && given >= report.accounts) {
    throw new EbbError(
      'SEGMENT_UNKNOWN',
      `every account has the same “${column}”, “${only.value}”, so there is no “where” to look at`,
      'Ask “has churn moved?”, or name another column that groups accounts (on the command line: --columns segment=COLUMN).',
    );
  }
  return column;
}

function checkRequest(request: SideQuestionOf<'where'>): void {
  if (request.segment !== undefined) {
    throw new EbbError(
      'OPTION_INVALID',
      `“where” looks at all groups side by side, and “${request.segment.value}” is only one of them`,
      `Leave it out, or ask “has churn moved for ${request.segment.value}?”.`,
    );
  }
  if (request.view !== undefined && request.view !== 'start') {
    throw new EbbError(
      'OPTION_INVALID',
      `“where” counts accounts in the order in which they started, not by ${request.view}`,
      'Leave the view out, or ask “has churn moved?” with it.',
    );
  }
  if (request.chart !== undefined && request.chart !== 'p' && request.chart !== 'p-prime') {
    throw new EbbError(
      'OPTION_INVALID',
      `“where” compares shares lost, and a chart of the kind ${request.chart} does not show them`,
      'Leave the kind out, or take p or p-prime.',
    );
  }
}

/** The stretches of all accounts that are told apart: those of the verdict's own before and after, when it has them. */
function stretchesFor(overall: Answer, census: Census): Stretches | null {
  const points = census.subgroups.length;
  // Fewer points say as little about parts as about the whole.
  if (points < LEAST_POINTS) return null;
  const { chart } = overall;
  if (chart === null || chart.points.length !== points || chart.kind === 'g' || chart.kind === 't')
    return stretchesOf(points, points, null);
  return stretchesOf(points, chart.baseline.last, overall.judgement?.start?.first ?? null);
}

/** The census calls what it pools by a word that a group may have for a name too. */
function namedRest(segments: Census['segments'], { report }: AccountTable): Census['segments'] {
  return segments.map((one) =>
    one.segment === OTHER_SEGMENT && !report.segments.some(({ value }) => value === OTHER_SEGMENT)
      ? { ...one, segment: 'the rest' }
      : one,
  );
}

/** Accounts that a group at the rate of all accounts needs to be judged. */
function accountsNeeded({ rate }: CensusPlan): number {
  return LEAST_POINTS * subgroupSizes(rate > 0 && rate < 1 ? rate : 0.05).fiveLosses;
}

function cautionsOf(
  { table: { report }, scope }: SideContext,
  request: SideQuestionOf<'where'>,
  readings: readonly GroupReading[],
): string[] {
  const list = readCautions(report, scope.asOf);
  const { since } = request;
  const followed = (one: GroupReading): boolean =>
    since === undefined ||
    one.chart === null ||
    one.subgroups.filter(({ lastStart }) => lastStart < since).length === one.chart.baseline.last;
  if (since !== undefined && request.baseline === undefined && !readings.every(followed)) {
    list.push(
      `Not every group has points enough before ${dayInWords(since)} and one after it; there the usual split of the chart was kept.`,
    );
  }
  if (request.asOf === undefined && report.asOfSource !== 'given') {
    list.push(
      `The data is taken to be complete through ${dayInWords(scope.asOf)}, worked out from the file; correct it if it is not, since a wrong date makes young accounts look settled.`,
    );
  }
  return list;
}
