import type { Judgement } from '../judgement.ts';
import type { Delay } from '../types.ts';
import { ANSWERED, RAREST_TOLD } from './evidence.ts';
import { count, counted, percent } from './format.ts';

/** How soon a move would be flagged, and what an estimated level does to the false-alarm figure: read after everything else. `unit` is what is counted. */
export function furtherTrustSentences(judgement: Judgement, unit: string): string[] {
  if (!ANSWERED.has(judgement.finding)) return [];
  const { delay, estimated, falseAlarmEvery } = judgement.trust;
  const moves = [
    delay?.rise ? `a rise by half, to ${percent(delay.rise.rate)}, ${howSoon(delay.rise, unit)}` : null,
    delay?.fall ? `a halving, to ${percent(delay.fall.rate)}, ${howSoon(delay.fall, unit)}` : null,
  ].filter((move) => move !== null);
  const sentences = moves.length > 0 ? [`How soon a first flag would come, on average: ${moves.join('; ')}.`] : [];
  if (estimated && falseAlarmEvery !== null && falseAlarmEvery <= RAREST_TOLD) {
    sentences.push(
      `The usual level is itself a little off: in 8 of 10 charts like this one a false flag comes once in ${range(estimated)}.`,
    );
  }
  return sentences;
}

/** "after about 4 points (520 accounts, about 8 weeks)". */
function howSoon({ points, accounts, weeks }: Delay, unit: string): string {
  if (points === null || accounts === null || points > RAREST_TOLD) return 'hardly ever';
  const many = counted(accounts < 100 ? accounts : Math.round(accounts / 10) * 10, unit);
  const time = weeks === null ? '' : `, about ${counted(Math.max(1, weeks), 'week')}`;
  return `after about ${counted(Math.max(1, points), 'point')} (${many}${time})`;
}

function range({ low, high }: { low: number; high: number | null }): string {
  if (high === null || high > RAREST_TOLD) return `${counted(low, 'point')} or more`;
  return `${count(low)} to ${counted(high, 'point')}`;
}
