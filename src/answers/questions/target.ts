import type { Chart } from '../../charts/types.ts';
import { isoDay } from '../../days.ts';
import { drawPlate } from '../../picture/picture.ts';
import { type TargetPictureInput, targetAltText, targetScene } from '../../picture/questions/target.ts';
import { LEAST_POINTS } from '../../verdict/judgement.ts';
import { readTarget } from '../../verdict/questions/target/reading.ts';
import { targetPercent, targetWords } from '../../verdict/questions/target/words.ts';
import { judgedPoints } from './judgedPoints.ts';
import { noPoints } from './noPoints.ts';
import type { AnswerSide, Reply } from './types.ts';

/** Is a target met beyond chance, and will the next points meet it? */
export const answerTarget: AnswerSide<'target'> = async (context, request): Promise<Reply> => {
  const { rate: target } = request;
  if (!(target >= 0 && target <= 1)) return impossible(target);
  const points = await judgedPoints(context);
  if (points.chart === null) return noPoints('target', `whether a target of ${targetPercent(target)} is met`, points);
  const { chart, judgement, dates, census, tenure, whose, view } = points;
  const reading = readTarget(chart, judgement, target, chart.subgroupSize ?? meanSize(chart));
  const words = targetWords(reading, {
    tenure,
    view,
    dates,
    whose,
    points: chart.points.length,
    inflowPerWeek: census.inflowPerWeek,
    unsure: judgement.finding === 'unsteady-baseline' || judgement.finding === 'mix-unclear',
    fewPoints: chart.points.length < LEAST_POINTS,
    readCautions: points.readCautions,
  });
  const drawn: TargetPictureInput = {
    reading,
    chart,
    dates,
    headline: words.headline,
    measure: view.measure(tenure),
    subject: context.subject,
    asOf: context.scope.asOf,
  };
  return {
    kind: 'target',
    ...words,
    figures: figures(),
    picture: context.picture ? await drawPlate(targetScene(drawn), targetAltText(drawn)) : null,
  };

  function figures(): Reply['figures'] {
    const { stretch, interval } = reading;
    const start = dates[stretch.from - 1]?.firstStart ?? null;
    return {
      target,
      outcome: reading.outcome,
      stretch: {
        from: stretch.from,
        to: stretch.to,
        reason: stretch.reason,
        start: start === null ? null : isoDay(start),
        points: stretch.counts.length,
        pointsMet: reading.pointsMet,
      },
      rate: interval.estimate,
      low: interval.low,
      high: interval.high,
      ...stretch.pooled,
      method: reading.method,
      chanceOfSoFew: reading.soFew,
      chanceOfSoMany: reading.soMany,
      dispersion: reading.dispersion,
      nextRange: reading.nextRange,
      next: reading.next,
      accountsToTell: reading.accountsToTell,
    };
  }
};

/** Where points differ in size, the next ones are taken to be as large as those before them are on average. */
function meanSize({ points }: Chart): number {
  return Math.max(1, Math.round(points.reduce((sum, { accounts }) => sum + accounts, 0) / points.length));
}

function impossible(target: number): Reply {
  const high = target > 1;
  return {
    kind: 'target',
    headline: high
      ? `A target of ${targetPercent(target)} cannot be tested: no more than all accounts, 100 %, can be lost.`
      : `A target of ${targetPercent(target)} cannot be tested: no fewer than none can be lost.`,
    evidence: [],
    cautions: [],
    next: ['Name a share of accounts between 0 % and 100 %, such as "target 5 %".'],
    figures: { target, outcome: 'impossible' },
    picture: null,
  };
}
