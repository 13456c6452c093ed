import type { Answer } from '../../answers/types.ts';
import type { Understanding } from '../../requests/types.ts';
import { understoodLines } from '../../requests/understoodLines.ts';
import { ACTION } from '../names.ts';
import { type Block, bullets, button, context, type Message, message, section } from './blocks.ts';
import { moreButton, verdictLines } from './moreLines.ts';
import { inert, plainLine, shortened } from './text.ts';

/** The question put back into words, and what found no use; shown when somebody asked in words. */
export type UnderstoodWords = Pick<Understanding, 'understood' | 'notUnderstood'>;

const MOST_PIECES = 5;
const ALT_LENGTH = 2000;
const BUTTON_VALUE_LENGTH = 2000;

/**
 * The verdict as a message.
 * @param words  null when nobody asked in words (after an upload)
 * @param again  the question in words, for the button that asks it again
 * @param fileId the uploaded picture; null leaves it out (the text carries the whole meaning)
 */
export function verdictMessage(
  answer: Answer,
  words: UnderstoodWords | null,
  fileId: string | null,
  again: string,
): Message {
  const { verdict, picture } = answer;
  const headline = inert(verdict.headline);
  const understood = words ? shownLines(understoodLines(words), MOST_PIECES + 1) : [];
  const { whole, shown, rest } = verdictLines(verdict, answer.signals);
  const image: Block | undefined =
    picture && fileId !== null
      ? {
          type: 'image',
          slack_file: { id: fileId },
          alt_text: shortened(
            plainLine(picture.altText) || plainLine(verdict.headline) || 'Chart of churn',
            ALT_LENGTH,
          ),
        }
      : undefined;
  const buttons = [
    ...(again.length <= BUTTON_VALUE_LENGTH ? [button('Ask again', ACTION.again, again)] : []),
    ...(rest ? [moreButton(rest)] : []),
  ];
  return message(
    [headline, ...bullets([...whole.evidence, ...whole.cautions, ...whole.next]), ...understood],
    [
      understood.length > 0 && context(understood),
      section([`*${headline}*`]),
      image,
      shown.evidence.length > 0 && section(['*What it rests on*', ...bullets(shown.evidence)]),
      shown.cautions.length > 0 && section(['*Keep in mind*', ...bullets(shown.cautions)]),
      shown.next.length > 0 && section(['*What next*', ...bullets(shown.next)]),
      buttons.length > 0 && { type: 'actions', elements: buttons },
    ],
  );
}

/** Lines that may hold what somebody else wrote, safe to show and few. */
export function shownLines(lines: readonly string[], most: number): string[] {
  return lines.slice(0, most).map((line) => inert(shortened(line, 700)));
}
