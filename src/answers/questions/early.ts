import { tenureInWords } from '../../census/tenure.ts';
import { EbbError } from '../../errors.ts';
import { drawPlate } from '../../picture/picture.ts';
import { type EarlyDrawing, earlyAltText, earlyScene, noWatchScene } from '../../picture/questions/early.ts';
import { chartAndJudge } from '../../verdict/chartAndJudge.ts';
import type { Judgement } from '../../verdict/judgement.ts';
import { earlyFigures, earlyWords } from '../../verdict/questions/early.ts';
import { readCautions } from '../readCautions.ts';
import { earlyDrawing } from '../watch/earlyDrawing.ts';
import { earlyFindings } from '../watch/earlyFindings.ts';
import { type Moves, USUAL_MOVES, type Watched, watchAccounts } from '../watch/watchAccounts.ts';
import type { AnswerSide, Reply, SideContext } from './types.ts';

/** A move smaller than this cannot be told from none account by account within years. Our choice, no source. */
const LEAST_MOVE = 0.1;
const LARGEST_MOVE = 20;

/**
 * The account-by-account watch, which does not wait for a subgroup to fill: whether it is quiet, climbing or in alarm, in either direction.
 * Accounts that have not reached the tenure point are not counted, also when they are lost already: that would be the classic bias.
 */
export const answerEarly: AnswerSide<'early'> = async (context, request) => {
  // A move that cannot be watched for is refused before anything is counted.
  if (request.move !== undefined) movesOf(request.move);
  const asked = await context.ask();
  const census = asked.census?.request.view === 'start' ? asked.census : await context.census();
  const byRate = asked.judgement !== null && asked.chart !== null && (asked.chart.scale ?? 'rate') === 'rate';
  const { chart, judgement } =
    byRate || census.subgroups.length === 0
      ? asked
      : chartAndJudge({ counts: census.subgroups, segments: census.segments, runLength: false });
  if (chart === null || judgement === null || NO_LEVEL.has(judgement.finding))
    return withoutLevel(context, asked.verdict);
  const watched = await watchAccounts(context.table, census, chart, judgement, (usual) =>
    movesOf(request.to === undefined ? request.move : request.to / usual),
  );
  if (watched.accounts === 0) return withoutLevel(context, asked.verdict);
  const found = earlyFindings(watched, census, {
    tenure: tenureInWords(census.request.tenure),
    segment: context.scope.segment ?? null,
    overdispersed: judgement.dispersion !== null && judgement.dispersion.pValue < 0.01,
    mixMoved: judgement.mix !== null && judgement.mix.explains !== 'none',
    verdict: asked.verdict.headline,
  });
  const words = earlyWords(found);
  const usualCautions = asked.verdict.cautions;
  return {
    kind: 'early',
    ...words,
    cautions: [
      ...words.cautions,
      ...readCautions(context.table.report, context.scope.asOf),
      ...usualCautions.slice(-1),
    ],
    figures: earlyFigures(found),
    picture: context.picture ? await draw(context, watched, found) : null,
  };
};

/** Findings that leave no level to watch against. */
const NO_LEVEL: ReadonlySet<Judgement['finding']> = new Set(['too-few-points', 'no-level', 'unsteady-baseline']);

async function withoutLevel(context: SideContext, { headline, cautions, next }: SideVerdict): Promise<Reply> {
  const told = `No early watch is possible: it needs a usual level to watch against. ${headline}`;
  return {
    kind: 'early',
    headline: told,
    evidence: [],
    cautions,
    next,
    figures: { state: null, direction: null, rise: null, fall: null, falseAlarmEvery: null },
    picture: context.picture ? await drawPlate(noWatchScene(told, context.subject, context.scope.asOf), told) : null,
  };
}

type SideVerdict = Pick<Awaited<ReturnType<SideContext['ask']>>['verdict'], 'headline' | 'cautions' | 'next'>;

/** The move somebody named, on its own side; the other side keeps the usual one. */
function movesOf(move: number | undefined): Moves {
  if (move === undefined) return USUAL_MOVES;
  if (!(Math.abs(move - 1) >= LEAST_MOVE - 1e-9) || move > LARGEST_MOVE || move <= 0)
    throw new EbbError(
      'OPTION_INVALID',
      `a change of the usual rate by a factor of ${Number(move.toPrecision(3))} cannot be watched for account by account`,
      'Name a rise or a fall by 10 % or more, such as “early, for a doubling” or “early, a fall by 30 %”.',
    );
  return move > 1 ? { ...USUAL_MOVES, rise: move } : { ...USUAL_MOVES, fall: move };
}

function draw(context: SideContext, watched: Watched, found: EarlyDrawing['found']) {
  const drawing = earlyDrawing(watched, found, context.subject, context.scope.asOf);
  return drawPlate(earlyScene(drawing), earlyAltText(drawing));
}
