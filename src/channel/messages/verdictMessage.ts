import type { Answer } from '../../answers/types.ts';
import { ACTION } from '../names.ts';
import { type Block, bullets, button, context, type Message, message, section } from './blocks.ts';
import { inert, plainLine, shortened } from './text.ts';

export interface UnderstoodWords {
  /** the question put back into words; shown when somebody asked in words */
  readonly understood: string;
  readonly notUnderstood: readonly { readonly text: string; readonly nearest: string }[];
}

/** Most lines shown of each kind: the whole list of passed flags of a long history would bury the answer. */
const MOST_LINES = 14;
const ALT_LENGTH = 2000;
const BUTTON_VALUE_LENGTH = 2000;

/**
 * The verdict as a message.
 * @param words  null when nobody asked in words (after an upload)
 * @param fileId the uploaded picture; null leaves it out (the text carries the whole meaning)
 * @param again  the question in words, for the button that asks it again
 */
export function verdictMessage(
  answer: Answer,
  words: UnderstoodWords | null,
  fileId: string | null,
  again: string,
): Message {
  const { verdict, picture } = answer;
  const headline = inert(verdict.headline);
  const understood = words ? understoodLines(words) : [];
  const evidence = bullets(limited(verdict.evidence));
  const cautions = bullets(limited(verdict.cautions));
  const next = bullets(limited(verdict.next));
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
  return message(
    [headline, ...evidence, ...cautions, ...next, ...understood],
    [
      understood.length > 0 && context(understood),
      section([`*${headline}*`]),
      image,
      evidence.length > 0 && section(['*What it rests on*', ...evidence]),
      next.length > 0 && section(['*What next*', ...next]),
      cautions.length > 0 && section(['*Keep in mind*', ...cautions]),
      again.length <= BUTTON_VALUE_LENGTH && {
        type: 'actions',
        elements: [button('Ask again', ACTION.again, again)],
      },
    ],
  );
}

/** "I understood: …", and each piece that found no use with the nearest thing that can be done. */
export function understoodLines(words: UnderstoodWords): string[] {
  return [
    `I understood: ${inert(shortened(words.understood, 600))}`,
    ...words.notUnderstood
      .slice(0, 5)
      .map((one) => `I had no use for “${inert(shortened(one.text, 120))}”. ${inert(shortened(one.nearest, 500))}`),
  ];
}

function limited(lines: readonly string[]): string[] {
  const shown = lines.slice(0, MOST_LINES).map((line) => inert(shortened(line, 800)));
  return lines.length > shown.length ? [...shown, `… and ${lines.length - shown.length} more`] : shown;
}
