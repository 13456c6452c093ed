import { type Day, dayInWords } from '../../days.ts';

/** Cautions that hold of answers of every kind. */
export const NOT_WHY =
  'This says that something changed, not why; a before and after is no proof that any one action did it.';
export const OWN_DEFINITIONS =
  'For pay, forecasts, investors or auditors, your company’s own written definitions and its finance and legal people decide.';

/** Of a data-through date that nobody named. */
export function asOfInferredWords(asOf: Day): string {
  return `The data is taken to be complete through ${dayInWords(asOf)}, worked out from the file; correct it if it is not, since a wrong date makes young accounts look settled.`;
}
