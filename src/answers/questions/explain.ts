import { tenureInWords } from '../../census/tenure.ts';
import { blockProfile } from '../../charts/standing/blockProfile.ts';
import { drawPlate } from '../../picture/picture.ts';
import { type ExplainPictureInput, explainAltText, explainScene } from '../../picture/questions/explain.ts';
import { explainSteps } from '../../verdict/questions/explain/steps.ts';
import { viewWords } from '../../verdict/words/viewWords.ts';
import type { Answer } from '../types.ts';
import type { AnswerSide, Reply } from './types.ts';

const BY_SUBGROUPS: ReadonlySet<string> = new Set(['p', 'p-prime', 'ewma']);

/** How was the verdict reached? Step by step, with the numbers in the formulas. */
export const answerExplain: AnswerSide<'explain'> = async (context): Promise<Reply> => {
  const answer = await context.ask();
  const { chart, verdict, tenure, trust, judgement, dates, signals, report, census } = answer;
  const tenureWords = tenure === null ? null : tenureInWords(tenure);
  const steps = explainSteps({
    report,
    census,
    chart,
    dates,
    signals,
    trust,
    judgement,
    verdict,
    tenure: tenureWords,
    bySubgroups: chart !== null && BY_SUBGROUPS.has(chart.kind),
  });
  const drawn: ExplainPictureInput | null =
    chart === null || chart.points.length === 0
      ? null
      : {
          chart,
          dates,
          signals,
          verdict,
          blocks: blocksOf(answer),
          measure: measureOf(answer, tenureWords),
          subject: context.subject,
          asOf: context.scope.asOf,
        };
  return {
    kind: 'explain',
    headline: `How this was reached, in ${steps.length} steps: “${verdict.headline}”`,
    evidence: steps.map(({ sentences }, i) => `${i + 1}. ${sentences.join(' ')}`),
    cautions: verdict.cautions,
    next: [
      'Ask "spread" for how much the points vary, or "where" for the groups; every figure here is in the JSON of the command line.',
    ],
    figures: {
      outcome: verdict.outcome,
      chartKind: chart?.kind ?? null,
      steps: steps.map(({ title, sentences, figures }) => ({ title, sentences, ...figures })),
    },
    picture: context.picture && drawn ? await drawPlate(explainScene(drawn), explainAltText(drawn)) : null,
  };
};

/** Every possible last block, where one was looked for. */
function blocksOf({ chart, judgement }: Answer): ExplainPictureInput['blocks'] {
  const reading = judgement?.lastBlock;
  if (!chart || !reading) return null;
  const { baseline, points } = chart;
  const profile = blockProfile(
    { accounts: points.map(({ accounts }) => accounts), baselineLast: baseline.last, excluded: baseline.excluded },
    points.map(({ lost }) => lost),
  ).filter(({ ratio }) => Number.isFinite(ratio));
  return profile.length > 0 ? { profile, reading } : null;
}

function measureOf({ chart, census }: Answer, tenure: string | null): string {
  switch (chart?.kind) {
    case 'g':
      return 'accounts from one loss to the next';
    case 't':
      return 'days from one loss to the next';
    case 'individuals':
      return 'share of revenue lost';
    case 'cusum':
      return 'sum of the evidence, account by account';
    case 'ewma':
      return `smoothed share lost within ${tenure ?? 'the age'} of starting`;
    default:
      return viewWords(census?.request.view).measure(tenure ?? 'the age');
  }
}
