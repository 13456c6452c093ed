import { flagDelay, sizeThatSees } from '../../charts/runLength/flagDelay.ts';
import { LEAST_POINTS } from '../judgement.ts';
import type { PlanFindings, SizeOffer, SizeReason } from './planFindings.ts';

/** The chance with which a move is wanted to be flagged within the stated points. */
export const WANTED_CHANCE = 0.8;
/** Places of the curve of delay against size: as many as show its teeth, which come from counts being whole. */
const CURVE_PLACES = 120;

export interface SizeQuestion {
  /** rate that sizes are worked out for, 0 < rate < 1 */
  readonly rate: number;
  readonly matured: number;
  readonly inflowPerWeek: number;
  readonly move: number;
  readonly within: number;
  readonly sizes: { readonly fiveLosses: number; readonly positiveLowerLimit: number; readonly seesHalving: number };
  /** what "has it moved?" uses, and whether somebody asked for it */
  readonly subgroupSize: number;
  readonly asked: boolean;
  /** the move that sizes.seesHalving is for */
  readonly usualMove: { readonly move: number; readonly within: number };
  readonly rounded: (size: number) => number;
}

/** The sizes on offer, each with what it costs in waiting, and the delay as a curve over size. */
export function sizeOffers(
  question: SizeQuestion,
): Pick<PlanFindings, 'movedRate' | 'sizeForMove' | 'offers' | 'curve'> {
  const { rate, move, within, sizes, subgroupSize, usualMove, inflowPerWeek, matured } = question;
  const moved = rate * move;
  const movedRate = move === 1 || moved >= 1 ? null : moved;
  const usual = move === usualMove.move && within === usualMove.within;
  const sizeForMove =
    movedRate === null
      ? null
      : usual
        ? sizes.seesHalving
        : sizeThatSees(rate, movedRate, within, WANTED_CHANCE, sizes.fiveLosses, question.rounded);

  const offer = (size: number, reasons: readonly SizeReason[]): SizeOffer => {
    const delay = movedRate === null ? null : flagDelay(size, rate, movedRate);
    const delayPoints = delay?.mean ?? null;
    return {
      reasons,
      subgroupSize: size,
      chosen: size === subgroupSize,
      pointsNow: Math.floor(matured / size),
      weeksPerPoint: inflowPerWeek > 0 ? size / inflowPerWeek : null,
      weeksUntilVerdict:
        matured >= LEAST_POINTS * size ? 0 : inflowPerWeek > 0 ? (LEAST_POINTS * size - matured) / inflowPerWeek : null,
      falseAlarmEvery: flagDelay(size, rate, rate).mean,
      delayPoints,
      delayWeeks: delayPoints === null || inflowPerWeek <= 0 ? null : (delayPoints * size) / inflowPerWeek,
      chanceWithin: delay?.within(within) ?? 0,
    };
  };
  const reasons = new Map<number, SizeReason[]>();
  const add = (size: number, reason: SizeReason): void => {
    reasons.set(size, [...(reasons.get(size) ?? []), reason]);
  };
  add(sizes.fiveLosses, 'five-losses');
  add(sizes.positiveLowerLimit, 'positive-lower-limit');
  if (sizeForMove !== null) add(sizeForMove, 'sees-move');
  if (!reasons.has(subgroupSize)) add(subgroupSize, question.asked ? 'asked' : 'recommended');
  const offers = [...reasons].map(([size, why]) => offer(size, why));
  offers.sort((a, b) => a.subgroupSize - b.subgroupSize);
  return { movedRate, sizeForMove, offers, curve: movedRate === null ? [] : delayCurve(question, movedRate, offers) };
}

/** Mean delay over sizes from below the smallest offer to beyond the largest. */
function delayCurve(
  { rate, inflowPerWeek }: SizeQuestion,
  moved: number,
  offers: readonly SizeOffer[],
): PlanFindings['curve'] {
  const named = offers.map((one) => one.subgroupSize);
  const from = Math.max(2, Math.round(0.7 * Math.min(...named)));
  const to = Math.max(from + 10, Math.round(Math.max(1.15 * Math.max(...named), 2.5 * Math.min(...named))));
  const step = Math.max(1, (to - from) / CURVE_PLACES);
  const spaced = Array.from({ length: Math.floor((to - from) / step) + 1 }, (_, i) => Math.round(from + i * step));
  return [...new Set([...spaced, ...named])]
    .sort((a, b) => a - b)
    .flatMap((size) => {
      const points = flagDelay(size, rate, moved).mean;
      if (points === null) return [];
      const accounts = points * size;
      return [{ subgroupSize: size, points, delay: inflowPerWeek > 0 ? accounts / inflowPerWeek : accounts }];
    });
}
