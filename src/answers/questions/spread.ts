import { isoDay } from '../../days.ts';
import { drawPlate } from '../../picture/picture.ts';
import { type SpreadPictureInput, spreadAltText, spreadScene } from '../../picture/questions/spread.ts';
import { readSpread } from '../../verdict/questions/spread/reading.ts';
import { spreadWords } from '../../verdict/questions/spread/words.ts';
import { judgedPoints } from './judgedPoints.ts';
import { noPoints } from './noPoints.ts';
import type { AnswerSide, Reply } from './types.ts';

/** How much do the points vary, and how much would chance alone have them vary? */
export const answerSpread: AnswerSide<'spread'> = async (context): Promise<Reply> => {
  const points = await judgedPoints(context);
  if (points.chart === null) return noPoints('spread', 'how much the points vary', points);
  const { chart, judgement, dates, tenure, whose, readCautions, view } = points;
  const reading = readSpread(chart, judgement);
  const words = spreadWords(reading, {
    tenure,
    view,
    dates,
    whose,
    readCautions,
    points: chart.points.length,
    kind: chart.kind,
  });
  const drawn: SpreadPictureInput = {
    reading,
    headline: words.headline,
    measure: view.measure(tenure),
    one: view.one,
    subject: context.subject,
    asOf: context.scope.asOf,
  };
  const scene = context.picture ? spreadScene(drawn) : null;
  const { stretch, dispersion } = reading;
  return {
    kind: 'spread',
    ...words,
    figures: {
      outcome: reading.outcome,
      stretch: { from: stretch.from, to: stretch.to, reason: stretch.reason, points: stretch.counts.length },
      rate: reading.rate,
      chartKind: chart.kind,
      histogram: reading.histogram,
      dispersion,
      sigmaZ: reading.sigmaZ,
      deviation: reading.deviation,
      limits: reading.limits,
      furthest: reading.furthest.map(({ index, lost, accounts, z, expected }) => {
        const start = dates[index - 1]?.firstStart ?? null;
        return { point: index, start: start === null ? null : isoDay(start), lost, accounts, z, expected };
      }),
    },
    picture: scene && (await drawPlate(scene, spreadAltText(drawn))),
  };
};
