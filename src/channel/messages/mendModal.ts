import type { types } from '@slack/bolt';
import type { ColumnMap, DateOrder } from '../../accounts/types.ts';
import { type Day, isoDay } from '../../days.ts';
import type { MendTarget } from '../inbox.ts';
import { MEND, NO_COLUMN, VIEW_MEND } from '../names.ts';
import { plain } from './blocks.ts';
import { code } from './text.ts';

/** What the modal carries along, as text in its private metadata. */
export interface MendPlace {
  readonly target: MendTarget;
  readonly channel: string;
  readonly threadTs: string;
}

export interface MendForm {
  readonly fileName: string;
  readonly headers: readonly string[];
  readonly columns: ColumnMap;
  readonly dates: DateOrder | undefined;
  readonly asOf: Day | undefined;
}

/** A select holds at most 100 options; one is kept for "found by its name". */
const MOST_OPTIONS = 99;

/** Shown at once, so that the three seconds of the trigger are never spent on looking things up. */
export function mendLoading(place: MendPlace): types.ModalView {
  return {
    type: 'modal',
    callback_id: VIEW_MEND,
    private_metadata: JSON.stringify(place),
    title: plain('Correct this', 24),
    close: plain('Leave it', 24),
    blocks: [{ type: 'section', text: plain('One moment …', 100) }],
  };
}

/** For a modal that has nothing to offer. */
export function mendUnavailable(place: MendPlace): types.ModalView {
  const words = 'The columns of this file are not known any more. Drop the file into the channel again.';
  return { ...mendLoading(place), blocks: [{ type: 'section', text: plain(words, 300) }] };
}

/** Selects for the columns, the date order, and the day the data is complete through. */
export function mendModal(place: MendPlace, form: MendForm): types.ModalView {
  const { columns } = form;
  return {
    ...mendLoading(place),
    submit: plain('Read it again', 24),
    blocks: [
      { type: 'section', text: { type: 'mrkdwn', text: `How ${code(form.fileName)} is to be read:` } },
      columnInput(MEND.start, 'Start of the subscription', form.headers, columns.start, false),
      columnInput(MEND.end, 'End of the subscription, empty for customers', form.headers, columns.end, false),
      columnInput(MEND.id, 'Account id', form.headers, columns.id, true),
      columnInput(MEND.segment, 'Plan or another group', form.headers, columns.segment, true),
      columnInput(MEND.amount, 'Amount', form.headers, columns.amount, true),
      datesInput(form.dates),
      {
        type: 'input',
        block_id: MEND.asOf,
        optional: true,
        label: plain('Data complete through', 200),
        hint: plain(
          'The last day the export holds everything for. A wrong day makes young accounts look settled.',
          300,
        ),
        element: {
          type: 'datepicker',
          action_id: MEND.value,
          ...(form.asOf === undefined ? {} : { initial_date: isoDay(form.asOf) }),
        },
      },
    ],
  };
}

/** The option's value is the header's place: a header may be longer than a value may be. */
function columnInput(
  blockId: string,
  label: string,
  headers: readonly string[],
  chosen: string | undefined,
  optional: boolean,
): types.InputBlock {
  const named = headers.map((header, i) => ({ text: plain(header, 75), value: String(i) }));
  // A chosen column that lies beyond the hundredth must still be offered.
  const at = chosen === undefined ? -1 : headers.indexOf(chosen);
  const shown = named.slice(0, MOST_OPTIONS);
  if (at >= MOST_OPTIONS) shown[MOST_OPTIONS - 1] = named[at]!;
  const none = { text: plain('Found by its name', 75), value: NO_COLUMN };
  const options = optional ? [none, ...shown] : shown.length > 0 ? shown : [none];
  const initial = at >= 0 ? named[at] : optional ? none : undefined;
  return {
    type: 'input',
    block_id: blockId,
    label: plain(label, 200),
    optional: false,
    element: {
      type: 'static_select',
      action_id: MEND.value,
      options,
      ...(initial ? { initial_option: initial } : {}),
    },
  };
}

function datesInput(chosen: DateOrder | undefined): types.InputBlock {
  const options = [
    { text: plain('Told from the values', 75), value: 'auto' },
    { text: plain('Year first: 2025-06-30', 75), value: 'iso' },
    { text: plain('Day first: 30/06/2025', 75), value: 'dmy' },
    { text: plain('Month first: 06/30/2025', 75), value: 'mdy' },
  ];
  return {
    type: 'input',
    block_id: MEND.dates,
    label: plain('Order of the dates', 200),
    element: {
      type: 'static_select',
      action_id: MEND.value,
      options,
      initial_option: options.find((option) => option.value === chosen) ?? options[0]!,
    },
  };
}
