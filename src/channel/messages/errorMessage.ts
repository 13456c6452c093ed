import type { EbbError } from '../../errors.ts';
import type { MendTarget } from '../inbox.ts';
import { ACTION } from '../names.ts';
import { button, type Message, message, section } from './blocks.ts';
import { code, inert, shortened } from './text.ts';

/**
 * A deliberate error: what is wrong, and how to mend it.
 * @param about  the file's name, when the error is about a file
 * @param target when given, the columns and the data-through date can be chosen by hand
 */
export function errorMessage(error: EbbError, about?: string, target?: MendTarget): Message {
  const what = `${inert(shortened(error.message, 700))}.`.replace(/([.!?])\.$/, '$1');
  const opening = about === undefined ? sentence(what) : `I could not use ${code(about)}: ${what}`;
  const hint = inert(shortened(forChannel(error.hint), 700));
  return message(
    [opening, hint],
    [
      section([opening, hint].filter((line) => line !== '')),
      target && {
        type: 'actions',
        elements: [
          button(
            error.code === 'AS_OF_TOO_LATE' ? 'Correct this' : 'Choose the columns',
            ACTION.mend,
            JSON.stringify(target),
          ),
        ],
      },
    ],
  );
}

/** Anything unexpected: one fixed sentence; the reference leads to the log. */
export function unexpectedMessage(reference: string): Message {
  const line = `Something went wrong on my side, and it is written down. If you report it, give this reference: ${reference}.`;
  return message([line], [section([line])]);
}

/** Options of the command line mean nothing in a channel. */
function forChannel(hint: string): string {
  return hint.replace(/\s*\(on the command line:[^)]*\)/g, '');
}

function sentence(text: string): string {
  return text.slice(0, 1).toUpperCase() + text.slice(1);
}
