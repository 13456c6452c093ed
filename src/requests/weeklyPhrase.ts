import type { WeeklyTime } from './types.ts';

const WEEKDAYS = ['monday', 'tuesday', 'wednesday', 'thursday', 'friday', 'saturday', 'sunday'] as const;

const TIME = /\b(?:at\s+)?(\d{1,2})(?::(\d{2}))?\s*(am|pm)?(?=$|[\s,;:.!?])/i;
const EVERY = new RegExp(
  `\\b(?:every|each|on)\\s+(${WEEKDAYS.map((day) => `${day}|${day}s|${day.slice(0, 3)}`).join('|')})\\b`,
  'i',
);
/** An area and a place, as the IANA names zones; or UTC. */
const ZONE =
  /\b(?:in\s+|,\s*)?((?:Africa|America|Antarctica|Arctic|Asia|Atlantic|Australia|Europe|Indian|Pacific|Etc)\/[A-Za-z0-9_+\-/]+|UTC)\b/;

export interface WeeklyFound {
  /** zone absent: the setter's own */
  readonly time: Omit<WeeklyTime, 'zone'> & { readonly zone?: string };
  /** the sentence without the words about the time */
  readonly rest: string;
}

/**
 * "every monday at 9:00 Europe/Vienna, has churn moved for Orchard": the time, and the rest of the sentence.
 * Undefined when no weekday follows "every" or "each"; 'no-time' when a weekday is there and no time that exists.
 */
export function weeklyPhrase(sentence: string): WeeklyFound | 'no-time' | undefined {
  const every = EVERY.exec(sentence);
  if (!every || every[0].toLowerCase().startsWith('on')) return undefined;
  const weekday = WEEKDAYS.findIndex((day) => day.startsWith(every[1]!.toLowerCase().slice(0, 3))) + 1;
  const before = sentence.slice(0, every.index);
  let after = sentence.slice(every.index + every[0].length);
  const zone = ZONE.exec(after);
  if (zone) after = `${after.slice(0, zone.index)} ${after.slice(zone.index + zone[0].length)}`;
  const time = TIME.exec(after);
  // The time stands right after the weekday: a number further on belongs to the question ("at 6 months").
  if (
    !time ||
    after.slice(0, time.index).trim() !== '' ||
    /^\s*(days?|weeks?|months?|years?)\b/i.test(after.slice(time.index + time[0].length))
  )
    return 'no-time';
  const clock = clockOf(time);
  if (!clock) return 'no-time';
  const rest = `${before} ${after.slice(time.index + time[0].length)}`
    .replace(/\s+/g, ' ')
    .replace(/^[\s,:;]+|[\s,:;]+$/g, '');
  return { time: { weekday, ...clock, ...(zone ? { zone: zone[1]! } : {}) }, rest };
}

function clockOf(time: RegExpExecArray): { hour: number; minute: number } | undefined {
  const half = time[3]?.toLowerCase();
  const given = Number(time[1]);
  const minute = Number(time[2] ?? 0);
  if (minute > 59 || (half ? given < 1 || given > 12 : given > 23)) return undefined;
  const hour = half ? (given % 12) + (half === 'pm' ? 12 : 0) : given;
  return { hour, minute };
}

/** "every Monday at 09:00 (Europe/Vienna)": understood again. */
export function weeklyInWords({
  weekday,
  hour,
  minute,
  zone,
}: Omit<WeeklyTime, 'zone'> & { readonly zone?: string }): string {
  const day = WEEKDAYS[weekday - 1]!;
  const clock = `${String(hour).padStart(2, '0')}:${String(minute).padStart(2, '0')}`;
  return `every ${day.slice(0, 1).toUpperCase()}${day.slice(1)} at ${clock}${zone === undefined ? '' : ` ${zone}`}`;
}

const STOP =
  /^(please )?(stop|cancel|end|no more|pause) (the |posting |all |every )*(weekly|week|monday|tuesday|wednesday|thursday|friday|saturday|sunday|post|posts|posting)/i;
const SHOW =
  /^(show |list |which |what |when )?(are |is |do you post|the |your |our )*(weekly( posts?)?|schedules?|next posts?)( are there| is there| here)?$|^when do you post( next)?$/i;

/** "stop the weekly post 2": which of several, from 1; null for all. */
export function stopPhrase(sentence: string): { readonly which: number | null } | undefined {
  const plain = sentence.trim().replace(/[?.!]+$/, '');
  if (!STOP.test(plain)) return undefined;
  const which = /\b(\d{1,2})$/.exec(plain);
  return { which: which ? Number(which[1]) : null };
}

export function showsWeekly(sentence: string): boolean {
  return SHOW.test(sentence.trim().replace(/[?.!]+$/, ''));
}
