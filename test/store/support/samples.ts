import type { ReadReport } from '../../../src/accounts/types.ts';
import type { Dataset, InboxEntry, Upload } from '../../../src/store/types.ts';

export const REPORT: ReadReport = {
  rows: 4_812,
  accounts: 4_790,
  returned: 12,
  mergedRows: 22,
  asOf: 20_269,
  inferredAsOf: 20_269,
  asOfSource: 'latest-date',
  futureEnds: 1,
  firstStart: 19_000,
  lastStart: 20_200,
  columns: { id: 'member', start: 'first parcel', end: 'last parcel', segment: 'plan' },
  headers: ['member', 'first parcel', 'last parcel', 'plan'],
  dates: 'dmy',
  datesSource: 'values',
  encoding: 'utf-8',
  delimiter: ';',
  rejected: [
    {
      code: 'end-before-start',
      reason: 'the end date lies before the start date',
      rows: 3,
      firstLine: 88,
      examples: [{ line: 88, value: '01/02/2024' }],
    },
  ],
  segments: [
    { value: 'Allotment', accounts: 3_000 },
    { value: 'Orchard', accounts: 1_790 },
  ],
};

export function dataset(change: Partial<Omit<Dataset, 'id' | 'uploadedAt'>> = {}): Omit<Dataset, 'id' | 'uploadedAt'> {
  return {
    channelId: 'C-seeds',
    name: 'parcels.csv',
    fileId: 'F1',
    uploadedBy: 'U-wren',
    choices: { dates: 'dmy', asOf: 20_269, columns: { start: 'first parcel' } },
    report: REPORT,
    ...change,
  };
}

export function upload(change: Partial<Omit<Upload, 'id'>> = {}): Omit<Upload, 'id'> {
  return {
    channelId: 'C-seeds',
    fileId: 'F1',
    fileName: 'parcels.csv',
    uploadedBy: 'U-wren',
    threadTs: '1746446400.000100',
    state: 'received',
    choices: {},
    datasetId: null,
    headers: ['member', 'first parcel'],
    ...change,
  };
}

let made = 0;

/** An entry about something of its own, unless told otherwise. */
export function entry(change: Partial<InboxEntry> = {}): InboxEntry {
  made += 1;
  return {
    eventKey: `Ev${made}`,
    naturalKey: `T-marrowby C-seeds F${made}`,
    teamId: 'T-marrowby',
    kind: 'mention',
    payload: { text: 'has churn moved?' },
    ...change,
  };
}
