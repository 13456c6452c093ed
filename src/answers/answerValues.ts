import type { ShiftTest } from '../charts/types.ts';
import { writeGapVerdict } from '../verdict/gaps/gapVerdict.ts';
import { judgeGaps } from '../verdict/gaps/judgeGaps.ts';
import type { GapContext } from '../verdict/gaps/types.ts';
import type { PictureInput, PointDates } from '../verdict/types.ts';
import { judgeValues } from '../verdict/values/judgeValues.ts';
import { writeValuesVerdict } from '../verdict/values/valuesVerdict.ts';
import { finishAnswer } from './finishAnswer.ts';
import { gapsDrawn } from './gapsDrawn.ts';
import type { Answer } from './types.ts';

export interface ValuesQuestion {
  /** g: accounts kept between two losses; t: time between two losses; individuals: any values */
  readonly kind: 'g' | 't' | 'individuals';
  /** one or more finite values in time order */
  readonly values: readonly number[];
  readonly baseline?: number;
  readonly tests?: readonly ShiftTest[];
  readonly picture: boolean;
  readonly clock: () => number;
}

/** Charts ready values that are no counts: for published tables and for people with a spreadsheet. Points are known by number. */
export async function answerValues(question: ValuesQuestion): Promise<Answer> {
  const { clock } = question;
  const begun = clock();
  const dates: PointDates[] = question.values.map(() => ({ firstStart: null, lastStart: null, asOf: null }));
  return finishAnswer(
    { ...answered(question), dates, judgement: null, census: null, plan: null, countedAt: begun },
    { picture: question.picture, clock, begun, readMs: 0, report: null },
  );
}

type Answered = Pick<Answer, 'verdict' | 'chart' | 'signals' | 'trust'> & {
  readonly drawn: Omit<PictureInput, 'chart' | 'dates' | 'signals' | 'verdict'>;
};

function answered({ kind, values, baseline, tests }: ValuesQuestion): Answered {
  const how = { ...(baseline === undefined ? {} : { baselineLast: baseline }), ...(tests ? { tests } : {}) };
  if (kind === 'individuals') {
    const judgement = judgeValues({ values, ...how });
    const { chart, signals, trust, finding, series, before, after } = judgement;
    const split = finding === 'unsteady-baseline' ? (series?.checks ?? null) : null;
    return {
      verdict: writeValuesVerdict(judgement),
      chart,
      signals,
      trust,
      drawn: {
        waiting: null,
        immature: 0,
        measure: 'values one by one',
        subject: 'ready values',
        asOf: null,
        wouldSee: trust.wouldSee,
        split: split ? { after: split.splitAfter } : null,
        ...(before && after ? { levels: { before: before.estimate, after: after.estimate } } : {}),
      },
    };
  }
  const judgement = judgeGaps({ kind, gaps: values, open: 0, ...how });
  const context: GapContext = {
    kind,
    tenure: null,
    dates: [],
    losses: values.length,
    open: 0,
    accounts: null,
    watched: null,
    immature: 0,
    inflowPerWeek: 0,
    asOf: null,
    asOfInferred: false,
    segment: null,
    whyThisChart: [],
    howChosen: [],
    readCautions: [],
  };
  const { chart, signals, trust } = judgement;
  const measure = kind === 'g' ? 'accounts kept from one loss to the next' : 'time from one loss to the next';
  return {
    verdict: writeGapVerdict(judgement, context),
    chart,
    signals,
    trust,
    drawn: gapsDrawn(judgement, context, { measure, subject: 'ready gaps' }),
  };
}
