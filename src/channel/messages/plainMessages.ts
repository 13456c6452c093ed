import { notUsedLines } from '../../requests/understoodLines.ts';
import { COMMAND } from '../names.ts';
import { bullets, context, type Message, message, section } from './blocks.ts';
import { code, inert, shortened } from './text.ts';
import { shownLines, type UnderstoodWords } from './verdictMessage.ts';

const EXAMPLES = [
  '“has churn moved?”',
  '“has churn moved at 6 months for the annual plan since January 2025?”',
  '“what did you read?”',
];
/** The questions around the verdict, each with what it answers. */
const AROUND = [
  '“where did churn move?”: which groups, and was it only the mix',
  '“plan”: at which age, in which size, and how long until a verdict',
  '“early”: account by account, without waiting for a full point',
  '“revenue”: the same for money',
  '“reconcile 14.2 %”: which calculation gives a reported figure',
  '“worth”: how long an account lasts, and what it brings',
  '“target 5 %”: is a target met beyond chance',
  '“spread”: do the points vary more than chance allows',
  '“explain”: how the last verdict was reached, with its numbers',
];

/** What can be asked, in a few lines. */
export function helpMessage(words?: UnderstoodWords): Message {
  const lead = '*Drop an export of your accounts here, and ask me whether churn has moved.*';
  const lines = [
    'The export is a CSV with an id, a start date and an end date for each account; the end is empty while it is still a customer.',
    `Ask by mentioning me or with ${COMMAND}: ${EXAMPLES.join(', ')}.`,
    `Around it: ${AROUND.join('; ')}.`,
    'By itself, once a week: “every Monday at 9:00”; “when do you post?”; “stop the weekly post”.',
    'The answer says whether churn really moved or only wiggled, since about when, how much, and how big a change could have been missed.',
    'An answer says that something changed, not why. For pay, forecasts, investors or auditors, your own written definitions and your finance and legal people decide.',
  ];
  const missed = words ? shownLines(notUsedLines(words.notUnderstood), 5) : [];
  return message(
    [...missed, lead.replaceAll('*', ''), ...lines],
    [missed.length > 0 && context(missed), section([lead, ...bullets(lines)])],
  );
}

/** Said once when the bot is brought into a channel: three lines. */
export function joinedMessage(): Message {
  const lines = [
    'I say whether churn has moved, with a control chart: whether it is more than chance, since about when, and by how much.',
    'Drop an export of your accounts here (CSV: id, start date, end date), and I will say what I read and what it shows.',
    `Then ask me at any time: “has churn moved?”. \`${COMMAND} help\` lists what else I understand.`,
  ];
  return message(lines, [section(lines)]);
}

/** How to hand in an export, when a question comes before there is one. */
export function noDataMessage(practice: boolean): Message {
  const lines = [
    'There is no export in this channel yet, so there is nothing to count.',
    'Drop a CSV here with one row for each account: an id, the date it started, and the date it ended (empty while it is still a customer). A column with the plan lets you ask about one plan at a time.',
    ...(practice ? ['This is the practice workspace: the page offers sample exports you can drop here.'] : []),
  ];
  return message(lines, [section(lines)]);
}

/** For a post that mentions the bot and holds a file it does not read. */
export function cannotReadMessage(name: string, why: 'kind' | 'elsewhere' | 'gone'): Message {
  const reasons = {
    kind: `${code(name)} is not an export I can read. I read tables as text: CSV, or the same with tabs or semicolons. From a spreadsheet, save the sheet as CSV.`,
    elsewhere: `${code(name)} is only linked here and its content lies elsewhere. Download it and drop the CSV itself into the channel.`,
    gone: `${code(name)} is no longer there, or I am not allowed to see it. Drop it into the channel again.`,
  };
  return message([reasons[why]], [section([reasons[why]])]);
}

/** Opens the thread of an answer to a slash command, which has no message of its own. */
export function commandRoot(user: string, text: string): Message {
  const line = `<@${user}> asks: ${inert(shortened(text, 300))}`;
  return message([line], [section([line])]);
}

/** Said when the practice workspace starts again: its messages are gone, what was read is not. */
export function stillHereMessage(name: string, accounts: number): Message {
  const lines = [
    `I still have ${code(name)} from last time: ${accounts.toLocaleString('en-US')} accounts.`,
    'Mention me with a question (“has churn moved?”), or drop another export.',
  ];
  return message(lines, [section(lines)]);
}

export function shareFailedMessage(): Message {
  const line = 'The picture could not be shown here; the words above carry all of it.';
  return message([line], [context([line])]);
}
