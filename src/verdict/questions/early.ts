import { dayInWords, isoDay } from '../../days.ts';
import { pooled } from '../words/evidence.ts';
import { capitalised, count, counted, percent } from '../words/format.ts';
import { type EarlyFindings, leading, moodOf, type WatchState } from './earlyFindings.ts';

export interface EarlyWords {
  readonly headline: string;
  readonly evidence: readonly string[];
  readonly cautions: readonly string[];
  readonly next: readonly string[];
}

/** The early watch in words. */
export function earlyWords(found: EarlyFindings): EarlyWords {
  return {
    headline: headline(found),
    evidence: evidence(found),
    cautions: cautions(found),
    next: next(found),
  };
}

/** "a rise to 9.2 %" */
export function aimOf({ direction, to }: WatchState): string {
  return `a ${direction} to ${percent(to)}`;
}

function headline(found: EarlyFindings): string {
  const { rise, fall, usual, segment } = found;
  const whose = segment === null ? '' : ` for ${segment}`;
  const state = leading(found);
  switch (moodOf(state)) {
    case 'alarm': {
      const { since } = state;
      const both = moodOf(rise) === 'alarm' && moodOf(fall) === 'alarm' ? ' Both sums stand in alarm.' : '';
      return `The early watch has raised an alarm${whose}: among accounts that started from about ${dayInWords(since!.start)}, about ${percent(since!.rate.rate)} are lost within ${found.tenure}, against the usual ${percent(usual.rate)}.${both} This is an early watch, not the verdict.`;
    }
    case 'climbing':
      return `The early watch is climbing${whose}: ${way(state)} of the way to an alarm for ${aimOf(state)} from the usual ${percent(usual.rate)} lost within ${found.tenure}.`;
    case 'quiet':
      return `The early watch is quiet${whose}: the newest accounts do not look like ${aimOf(rise)} or ${aimOf(fall)} from the usual ${percent(usual.rate)} lost within ${found.tenure}.`;
  }
}

/** "62 %", a whole number: nobody should read more into it. */
function way({ share }: WatchState): string {
  return `${Math.floor(100 * share)} %`;
}

function evidence(found: EarlyFindings): string[] {
  const { watched, usual } = found;
  const sums = [leading(found), leading(found) === found.rise ? found.fall : found.rise];
  return [
    ...sums.map((state) => stateSentence(state)),
    `It follows accounts one by one in order of start and does not wait for a point to be full: ${counted(watched.accounts, 'account')} that started ${dayInWords(watched.first)} to ${dayInWords(watched.last)}, ${count(watched.lost)} of them lost within ${found.tenure}; the newest ${count(found.unfinished)} are not on the chart yet.`,
    `Usual level, from the ${counted(found.baselinePoints, 'point')} before them: ${pooled(usual)}.`,
    `With nothing changed, an alarm in either direction comes about once in ${count(found.falseAlarmEvery.accounts)} accounts${lasting(found.falseAlarmEvery.accounts, found)}.`,
    `A lasting rise to ${percent(found.rise.to)} raises an alarm after about ${counted(found.rise.toAlarm, 'account')}${lasting(found.rise.toAlarm, found)}, a lasting fall to ${percent(found.fall.to)} after about ${count(found.fall.toAlarm)}${lasting(found.fall.toAlarm, found)}.`,
    ...(found.verdict === null ? [] : [`The verdict itself, from full points: ${found.verdict}`]),
  ];
}

function stateSentence(state: WatchState): string {
  const aim = capitalised(aimOf(state));
  const passed =
    state.passed === null
      ? ''
      : ` ${state.passed.count === 1 ? 'An alarm' : `${counted(state.passed.count, 'alarm')}, the last`} raised by accounts that started from ${dayInWords(state.passed.first)}, went back after those of ${dayInWords(state.passed.last)}.`;
  if (state.since === null) return `${aim}: the sum stands at zero, nothing points that way.${passed}`;
  const since = `since it was last at zero, accounts that started from ${dayInWords(state.since.start)} have been lost at ${pooled(state.since.rate)}`;
  if (state.alarm !== null)
    return `${aim}: in alarm since an account that started on ${dayInWords(state.alarm.start)} and was read on ${dayInWords(state.alarm.readOn)}; ${since}.${passed}`;
  const often =
    // Of a sum near zero the figure means nothing to anybody.
    state.likeThisEvery === null || state.share < 0.25
      ? ''
      : `; with nothing changed it gets this far about once in ${counted(Math.max(1, state.likeThisEvery), 'account')}`;
  const climb = moodOf(state) === 'climbing' ? ` ${capitalised(since)}.` : '';
  return `${aim}: ${way(state)} of the way to an alarm${often}.${climb}${passed}`;
}

/** ", about 11 weeks at the recent pace"; nothing when no accounts come in. */
function lasting(accounts: number, { inflowPerWeek }: EarlyFindings): string {
  if (!(inflowPerWeek > 0)) return '';
  const weeks = accounts / inflowPerWeek;
  if (weeks < 1) return ` (about ${counted(Math.max(1, weeks * 7), 'day')})`;
  if (weeks < 100) return ` (about ${counted(weeks, 'week')})`;
  return ` (about ${(weeks / 52.18).toFixed(1)} years)`;
}

function cautions(found: EarlyFindings): string[] {
  const [seldom, often] = found.falseAlarmBetween;
  return [
    'This is an early watch and not the verdict: it rests on few accounts, and an alarm asks somebody to look, no more.',
    `The usual level is only known to lie between ${percent(found.usual.low)} and ${percent(found.usual.high)} (95 % interval); at the worse end of it false alarms come about once in ${count(Math.min(seldom, often))} accounts.`,
    ...(found.mixMoved
      ? [
          'The mix of groups has moved, and this watch follows all accounts together: it takes a moving mix for a move. Ask for one group at a time.',
        ]
      : []),
    ...(found.provisional
      ? [`The usual level is provisional: it rests on ${counted(found.baselinePoints, 'point')}, and 25 make it firm.`]
      : []),
    ...(found.overdispersed
      ? [
          'The points vary more than chance alone would make them (overdispersion), so this watch raises false alarms more often than stated.',
        ]
      : []),
    `Accounts that have not had ${found.tenure} yet are not counted, also when they have left already: counting the early leavers of a young group and not those who will stay would always look like a rise.`,
  ];
}

function next(found: EarlyFindings): string[] {
  const state = leading(found);
  switch (moodOf(state)) {
    case 'alarm':
      return [
        `Look at what changed for accounts that started from about ${dayInWords(state.since!.start)}: price, offer, channel, product, or how the export is made.`,
        'Ask “has churn moved?” before anything is decided; if it says steady, the next points will tell.',
      ];
    case 'climbing':
      return [
        'Nothing to decide yet: ask again with the next export; a climb that is chance falls back to zero by itself.',
      ];
    case 'quiet':
      return ['Nothing to do. Ask again with the next export, or ask “has churn moved?” for the verdict.'];
  }
}

/** The figures of the reply's JSON. */
export function earlyFigures(found: EarlyFindings): Record<string, unknown> {
  const day = (value: number | null | undefined): string | null => (value == null ? null : isoDay(value));
  const state = (one: WatchState): Record<string, unknown> => ({
    to: one.to,
    state: moodOf(one),
    wayToAlarm: one.share,
    since: one.since && { start: day(one.since.start), ...one.since.rate },
    alarm: one.alarm && { start: day(one.alarm.start), readOn: day(one.alarm.readOn) },
    passedAlarms: one.passed?.count ?? 0,
    likeThisEvery: one.likeThisEvery,
    accountsToAlarm: one.toAlarm,
    weeksToAlarm: found.inflowPerWeek > 0 ? one.toAlarm / found.inflowPerWeek : null,
  });
  return {
    state: moodOf(leading(found)),
    direction: moodOf(leading(found)) === 'quiet' ? null : leading(found).direction,
    tenure: found.tenure,
    usual: found.usual,
    baselinePoints: found.baselinePoints,
    accounts: found.watched.accounts,
    lost: found.watched.lost,
    unfinished: found.unfinished,
    firstStart: day(found.watched.first),
    lastStart: day(found.watched.last),
    rise: state(found.rise),
    fall: state(found.fall),
    falseAlarmEvery: {
      accounts: found.falseAlarmEvery.accounts,
      weeks: found.inflowPerWeek > 0 ? found.falseAlarmEvery.accounts / found.inflowPerWeek : null,
      method: found.falseAlarmEvery.method,
      standardError: found.falseAlarmEvery.standardError,
      ifUsualLow: found.falseAlarmBetween[0],
      ifUsualHigh: found.falseAlarmBetween[1],
    },
    inflowPerWeek: found.inflowPerWeek,
  };
}
