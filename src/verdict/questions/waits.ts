import { count, counted } from '../words/format.ts';

/** "about 3 weeks", "about 4 days". */
export function weeksInWords(weeks: number): string {
  if (weeks < 1) {
    const days = Math.max(1, Math.round(weeks * 7));
    return days === 7 ? 'about a week' : days === 1 ? 'about a day' : `about ${days} days`;
  }
  const whole = Math.round(weeks);
  if (whole === 1) return 'about a week';
  return weeks > 156 ? `about ${count(Math.round(weeks / 52.18))} years` : `about ${counted(whole, 'week')}`;
}

/** A move as a factor on the rate, as a noun: "a halving", "a rise by 30 %". */
export function moveNoun(move: number): string {
  if (move === 0.5) return 'a halving';
  if (move === 2) return 'a doubling';
  if (move === 3) return 'a tripling';
  const percent = Number((Math.abs(move - 1) * 100).toPrecision(3));
  return `a ${move > 1 ? 'rise' : 'fall'} by ${percent} %`;
}

/** How often chance alone gives such a result: "less than once in 10,000 times". */
export function chanceWords(pValue: number): string {
  if (pValue < 0.0001) return 'less than once in 10,000 times';
  if (pValue >= 0.095) return `in about ${Math.round(pValue * 100)} of 100 cases`;
  return `about once in ${count(Math.round(1 / pValue))} times`;
}
