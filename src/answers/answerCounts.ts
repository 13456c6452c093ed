import type { ChartKind, ShiftTest, SubgroupCount } from '../charts/types.ts';
import { chartAndJudge, isSubgroupKind } from '../verdict/chartAndJudge.ts';
import type { PointDates } from '../verdict/types.ts';
import { writeVerdict } from '../verdict/verdict.ts';
import { chosenTests } from '../verdict/words/testWords.ts';
import { drawnFrom } from './drawnFrom.ts';
import { finishAnswer } from './finishAnswer.ts';
import type { Answer } from './types.ts';

export interface CountsQuestion {
  readonly counts: readonly SubgroupCount[];
  readonly baseline?: number;
  readonly excluded?: readonly number[];
  readonly chart?: ChartKind;
  /** shift tests that decide; all of them when absent */
  readonly tests?: readonly ShiftTest[];
  readonly picture: boolean;
  readonly clock: () => number;
}

/** Charts ready counts: for published tables and for people with a spreadsheet. Without dates, points are known by number. */
export async function answerCounts(question: CountsQuestion): Promise<Answer> {
  const { counts, clock } = question;
  const begun = clock();
  const { chart, judgement } = chartAndJudge({
    counts,
    ...(question.baseline === undefined ? {} : { baselineLast: question.baseline }),
    ...(question.excluded ? { excluded: question.excluded } : {}),
    ...(isSubgroupKind(question.chart) ? { kind: question.chart } : {}),
    ...(question.tests ? { tests: question.tests } : {}),
  });
  const dates: PointDates[] = counts.map(() => ({
    firstStart: null,
    lastStart: null,
    asOf: null,
  }));
  const accounts = counts.reduce((sum, entry) => sum + entry.accounts, 0);
  const verdict = writeVerdict(chart, judgement, {
    tenure: null,
    dates,
    subgroupSize: chart.subgroupSize,
    accounts,
    matured: accounts,
    waiting: 0,
    immature: 0,
    nextPointOn: null,
    maturedOn: () => null,
    inflowPerWeek: 0,
    asOf: null,
    asOfInferred: false,
    segmentColumn: null,
    segment: null,
    segmentValues: [],
    howChosen: question.tests ? [chosenTests(question.tests)] : [],
    readCautions: [],
  });
  return finishAnswer(
    {
      verdict,
      chart,
      dates,
      signals: judgement.signals,
      trust: judgement.trust,
      judgement,
      census: null,
      plan: null,
      drawn: {
        ...drawnFrom(judgement),
        waiting: null,
        immature: 0,
        measure: 'share lost',
        subject: 'ready counts',
        asOf: null,
      },
      countedAt: begun,
    },
    { picture: question.picture, clock, begun, readMs: 0, report: null },
  );
}
