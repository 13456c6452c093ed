import type { DateOrder } from '../../accounts/types.ts';
import { dayFromIso, dayInWords } from '../../days.ts';
import type { EbbError } from '../../errors.ts';
import { ACTION } from '../names.ts';
import { button, type Message, message, plain, section } from './blocks.ts';
import { code, inert } from './text.ts';

const ORDERS = [
  ['dmy', 'Day first'],
  ['mdy', 'Month first'],
  ['iso', 'Year first'],
] as const satisfies readonly (readonly [DateOrder, string])[];

/** Asks how the dates of a file read, with one of its dates in both readings. Nothing is charted until somebody says. */
export function dateOrderMessage(error: EbbError, fileName: string, uploadId: string): Message {
  const { line, column, text } = error.detail;
  const readings = ORDERS.flatMap(([order, words]) => {
    const iso = error.detail[order];
    const day = typeof iso === 'string' ? dayFromIso(iso) : undefined;
    return day === undefined ? [] : [{ order, words, reading: dayInWords(day) }];
  });
  const mixed = error.code === 'DATES_MIXED';
  const opening = mixed
    ? `Some dates in ${code(fileName)} read only day first and others only month first.`
    : `The dates in ${code(fileName)} can be read in more than one way, and nothing in the file settles it.`;
  const example = `Line ${String(line)}, column ${code(String(column))}: ${code(String(text))} is ${readings
    .map((one) => `*${one.reading}* read ${one.words.toLowerCase()}`)
    .join(', or ')}.`;
  const ask = mixed
    ? 'Say which order is right; rows written the other way are then listed and left out.'
    : 'Say which it is, and I will read the file and answer.';
  const shown =
    readings.length >= 2 ? readings : ORDERS.slice(0, 2).map(([order, words]) => ({ order, words, reading: '' }));
  const options = shown.map((one) => ({
    text: plain(one.reading === '' ? one.words : `${one.words}: ${one.reading}`, 75),
    value: one.order,
  }));
  return message(
    [opening, example.replaceAll('*', ''), ask],
    [
      section([`*${opening}*`, example, ask]),
      {
        type: 'actions',
        block_id: `dates_${uploadId}`.slice(0, 255),
        elements: [
          {
            type: 'static_select',
            action_id: ACTION.dateOrder,
            placeholder: plain('How the dates read', 150),
            options,
          },
          button('Read it so', ACTION.dateOrderGo, uploadId, 'primary'),
        ],
      },
    ],
  );
}

/** Replaces the question once it is answered. */
export function dateOrderChosen(order: DateOrder, fileName: string, user: string): Message {
  const words = ORDERS.find(([one]) => one === order)?.[1] ?? order;
  const line = `Dates in ${code(fileName)} are read ${inert(words.toLowerCase())}, as <@${user}> said.`;
  return message([line], [section([line])]);
}
