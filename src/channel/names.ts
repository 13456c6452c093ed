/** The names under which buttons, selects, modals, commands and shortcuts are known; the manifest lists the same (a test compares). */
export const COMMAND = '/ebb';
export const SHORTCUT_READ = 'read_this_file';
export const VIEW_MEND = 'mend_reading';

export const ACTION = {
  mend: 'mend_open',
  dateOrder: 'date_order',
  dateOrderGo: 'date_order_go',
  again: 'ask_again',
  more: 'more_lines',
} as const;

/** Blocks of the mend modal; their ids name what an error is about. */
export const MEND = {
  start: 'mend_start',
  end: 'mend_end',
  id: 'mend_id',
  segment: 'mend_segment',
  amount: 'mend_amount',
  dates: 'mend_dates',
  asOf: 'mend_as_of',
  /** the one element in each of them */
  value: 'value',
} as const;

/** Option value for "no column chosen by hand: recognise it". */
export const NO_COLUMN = 'none';

export const EVENTS = ['app_mention', 'message', 'file_shared', 'member_joined_channel'] as const;
