import type { Judgement } from '../judgement.ts';
import type { Delay } from '../types.ts';
import { ANSWERED, RAREST_TOLD } from './evidence.ts';
import { count, counted, percent } from './format.ts';

/** How soon a move would be flagged, and what an estimated level does to the false-alarm figure: read after everything else. */
export function furtherTrustSentences(judgement: Judgement): string[] {
  if (!ANSWERED.has(judgement.finding)) return [];
  const { delay, estimated, falseAlarmEvery } = judgement.trust;
  const sentences: string[] = [];
  const moves = [
    delay?.rise ? (['a rise by half', delay.rise] as const) : null,
    delay?.fall ? (['a halving', delay.fall] as const) : null,
  ].filter((move) => move !== null);
  if (moves.length > 0)
    sentences.push(
      `How soon a first flag comes, on average: ${moves.map(([name, move]) => `${name}, to ${percent(move.rate)}, ${howSoon(move)}`).join('; ')}.`,
    );
  if (estimated && falseAlarmEvery !== null && falseAlarmEvery <= RAREST_TOLD) {
    const from = counted(estimated.low, 'point');
    const range =
      estimated.high === null || estimated.high > RAREST_TOLD
        ? `${from} or more`
        : `${count(estimated.low)} to ${counted(estimated.high, 'point')}`;
    sentences.push(
      `A usual level from ${counted(estimated.points, 'point')} is itself a little off: one false flag in ${range} is what 8 of 10 charts like this have.`,
    );
  }
  return sentences;
}

/** "after about 4 points (540 accounts, 5 weeks)". */
function howSoon({ points, accounts, weeks }: Delay): string {
  if (points === null || accounts === null || points > RAREST_TOLD) return 'hardly ever';
  const time = weeks === null ? '' : `, about ${counted(Math.max(1, weeks), 'week')}`;
  return `after about ${counted(Math.max(1, points), 'point')} (${counted(accounts, 'account')}${time})`;
}
