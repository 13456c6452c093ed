import type { Reply } from '../../answers/questions/types.ts';
import type { Answer } from '../../answers/types.ts';
import type { Picture } from '../../picture/picture.ts';
import type { Understanding } from '../../requests/types.ts';
import { understoodLines } from '../../requests/understoodLines.ts';
import type { Signal, Verdict } from '../../verdict/types.ts';
import { ACTION } from '../names.ts';
import { type Block, bullets, button, context, type Message, message, section } from './blocks.ts';
import { moreButton, verdictLines } from './moreLines.ts';
import { inert, plainLine, shortened } from './text.ts';

/** The question put back into words, and what found no use; shown when somebody asked in words. */
export type UnderstoodWords = Pick<Understanding, 'understood' | 'notUnderstood'>;

const MOST_PIECES = 5;
const ALT_LENGTH = 2000;
const BUTTON_VALUE_LENGTH = 2000;

/** What an answer says, whichever question it answers. */
export type Said = Pick<Verdict, 'headline' | 'evidence' | 'cautions' | 'next'> & {
  readonly picture: Pick<Picture, 'png' | 'altText'> | null;
  /** the flags told in the evidence */
  readonly signals: readonly Pick<Signal, 'words'>[];
};

export function saidBy(answer: Pick<Answer, 'verdict' | 'picture' | 'signals'> | Reply): Said {
  return 'verdict' in answer
    ? { ...answer.verdict, picture: answer.picture, signals: answer.signals }
    : { ...answer, signals: [] };
}

/**
 * An answer as a message.
 * @param words  null when nobody asked in words (after an upload)
 * @param again  the question in words, for the button that asks it again
 * @param fileId the uploaded picture; null leaves it out (the text carries the whole meaning)
 */
export function verdictMessage(
  said: Said,
  words: UnderstoodWords | null,
  fileId: string | null,
  again: string,
): Message {
  const { picture } = said;
  const headline = inert(said.headline);
  const understood = words ? shownLines(understoodLines(words), MOST_PIECES + 1) : [];
  const { whole, shown, rest } = verdictLines(said, said.signals);
  const image: Block | undefined =
    picture && fileId !== null
      ? {
          type: 'image',
          slack_file: { id: fileId },
          alt_text: shortened(plainLine(picture.altText) || plainLine(said.headline) || 'Chart of churn', ALT_LENGTH),
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
