import type { types } from '@slack/bolt';
import { oneLine, SECTION_LENGTH, shortened } from './text.ts';

export type Block = types.KnownBlock;
export type Button = types.Button;

/** What is posted: blocks for the eye, and a text that carries the same meaning for notifications and screen readers. */
export interface Message {
  readonly text: string;
  readonly blocks: Block[];
}

/** Longest text beside the blocks; the platform advises 4,000 and refuses longer updates. */
const TEXT_LENGTH = 3900;
/** All text of a message's blocks; the platform refuses from somewhere near 12,000. */
const BLOCKS_LENGTH = 9500;
const LINE_LENGTH = 900;
const MOST_BLOCKS = 50;

/** A section of lines that are already safe to show. Lines that do not fit are counted, not dropped in silence. */
export function section(lines: readonly string[]): Block {
  let text = '';
  for (const [i, whole] of lines.entries()) {
    const line = cutLine(whole);
    if (text.length + line.length + 1 > SECTION_LENGTH - 40) {
      text += `\n… and ${lines.length - i} more`;
      break;
    }
    text += i === 0 ? line : `\n${line}`;
  }
  return { type: 'section', text: { type: 'mrkdwn', text: text === '' ? ' ' : text } };
}

export function context(lines: readonly string[]): Block {
  const elements = lines.slice(0, 10).map((line) => ({ type: 'mrkdwn' as const, text: cut(line, 1900) }));
  return { type: 'context', elements };
}

export function bullets(lines: readonly string[]): string[] {
  return lines.map((line) => `• ${line}`);
}

export function button(text: string, actionId: string, value: string, style?: 'primary'): Button {
  return {
    type: 'button',
    text: { type: 'plain_text', text: shortened(text, 75) },
    action_id: actionId,
    value,
    ...(style ? { style } : {}),
  };
}

/** A plain text for a label, an option or a title, within its limit. */
export function plain(text: string, longest: number): types.PlainTextElement {
  const shown = shortened(oneLine(text), longest);
  return { type: 'plain_text', text: shown === '' ? '(no name)' : shown, emoji: false };
}

/** Puts a message together and keeps it within the platform's limits. */
export function message(text: readonly string[], blocks: readonly (Block | undefined | false)[]): Message {
  const kept: Block[] = [];
  let total = 0;
  for (const block of blocks) {
    if (!block || kept.length === MOST_BLOCKS) continue;
    const length = block.type === 'section' ? (block.text?.text.length ?? 0) : 0;
    if (total + length > BLOCKS_LENGTH) continue;
    total += length;
    kept.push(block);
  }
  const whole = text
    .filter((line) => line !== '')
    .map(cutLine)
    .join('\n');
  // The service refuses a message whose text is empty.
  return { text: whole.trim() === '' ? '…' : cut(whole, TEXT_LENGTH), blocks: kept };
}

function cutLine(line: string): string {
  return cut(line, LINE_LENGTH);
}

/** Cuts escaped text without leaving half of an "&amp;" behind. */
function cut(text: string, longest: number): string {
  if (text.length <= longest) return text;
  const head = text.slice(0, longest - 1).replace(/&[a-z]{0,4}$|[\uD800-\uDBFF]$/, '');
  // An odd backtick would make code of all that follows.
  return (head.match(/`/g)?.length ?? 0) % 2 === 1 ? `${head}\`…` : `${head}…`;
}
