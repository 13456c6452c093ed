import type { Understanding } from './types.ts';

const LONGEST_PIECE = 120;

/** What was understood, and each piece that found no use with the nearest thing that can be done; the same in the channel and on the command line. */
export function understoodLines({
  understood,
  notUnderstood,
}: Pick<Understanding, 'understood' | 'notUnderstood'>): string[] {
  return [`I understood: ${understood}`, ...notUsedLines(notUnderstood)];
}

/** Only the pieces that found no use. */
export function notUsedLines(notUnderstood: Understanding['notUnderstood']): string[] {
  return notUnderstood.map(({ text, nearest }) => `I could not use “${shortened(text)}” as it stands. ${nearest}`);
}

function shortened(text: string): string {
  const characters = [...text];
  return characters.length <= LONGEST_PIECE ? text : `${characters.slice(0, LONGEST_PIECE - 1).join('')}…`;
}
