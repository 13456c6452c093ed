import { dayInWords } from '../../days.ts';
import { type Message, message, section } from './blocks.ts';
import { inert } from './text.ts';

/** One or more plain lines; for posts that have no picture. */
export function linesMessage(lines: readonly string[]): Message {
  const safe = lines.map(inert);
  return message(safe, [section(safe)]);
}

/** The data is too old to say anything new from it. */
export function staleLines(name: string, asOf: number, today: number): string[] {
  return [
    `The data here (${name}) ends on ${dayInWords(asOf)}, ${today - asOf} days ago. I will not repeat an old answer as if it were news.`,
    'Drop a new export into this channel, and I will look at it at once.',
  ];
}
