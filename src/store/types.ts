import type { ColumnMap, DateOrder, ReadReport } from '../accounts/types.ts';
import type { Day } from '../days.ts';
import type { WeeklyTime } from '../requests/types.ts';

/** How a file was told to be read: kept so that a mend changes one thing and keeps the rest. */
export interface ReadChoices {
  readonly columns?: ColumnMap;
  readonly dates?: DateOrder;
  readonly asOf?: Day;
}

/** A dataset as stored: accounts as compact Parquet with pseudonymous ids, and what was read. */
export interface Dataset {
  readonly id: string;
  readonly channelId: string;
  readonly name: string;
  readonly fileId: string | null;
  readonly uploadedBy: string;
  readonly uploadedAt: Date;
  readonly choices: ReadChoices;
  readonly report: ReadReport;
}

export type UploadState = 'received' | 'asks' | 'read' | 'refused';

/** One file handed in, from arrival to dataset; lives on so that its reading can be mended in its thread. */
export interface Upload {
  readonly id: string;
  readonly channelId: string;
  readonly fileId: string;
  readonly fileName: string;
  readonly uploadedBy: string;
  readonly threadTs: string;
  readonly state: UploadState;
  readonly choices: ReadChoices;
  readonly datasetId: string | null;
  /** headers of the file, when they could be read, for the mend selects */
  readonly headers: readonly string[];
}

export interface ChannelSettings {
  readonly tenure?: string;
  readonly subgroupSize?: number;
  readonly segment?: string;
  readonly settleDays?: number;
}

/** What a weekly post showed, kept so that the next one can say what is new. Days since 1970. */
export interface Seen {
  /** when it was posted, milliseconds since 1970 */
  readonly at: number;
  readonly asOf: number;
  readonly outcome: string;
  readonly tenure: string;
  readonly subgroupSize: number;
  readonly points: readonly { readonly start: number; readonly accounts: number; readonly lost: number }[];
  readonly flags: readonly { readonly key: string; readonly words: string; readonly state: string }[];
}

/** A question that is answered in a channel by itself once a week. */
export interface Follow {
  readonly id: string;
  readonly channelId: string;
  /** in words that are understood again */
  readonly question: string;
  readonly time: WeeklyTime;
  readonly setBy: string;
  /** milliseconds since 1970 */
  readonly nextDue: number;
  /** moments at which a post was due and could not be made in time */
  readonly missed: readonly number[];
  readonly seen: Seen | null;
}

export interface DueFollow {
  readonly teamId: string;
  readonly id: string;
  readonly time: WeeklyTime;
  readonly due: number;
}

/** Everything one workspace may see; there is no way from here to another workspace's rows. */
export interface WorkspaceStore {
  readonly teamId: string;
  /** secret of this workspace for the keyed hash of account ids; made on first use */
  idKey(): Promise<string>;
  settings(channelId: string): Promise<ChannelSettings>;
  saveSettings(channelId: string, settings: ChannelSettings): Promise<void>;
  saveUpload(upload: Omit<Upload, 'id'>): Promise<Upload>;
  updateUpload(id: string, change: Partial<Omit<Upload, 'id' | 'channelId' | 'fileId'>>): Promise<Upload>;
  upload(id: string): Promise<Upload | undefined>;
  /** the upload whose conversation lives in this thread */
  uploadInThread(channelId: string, threadTs: string): Promise<Upload | undefined>;
  saveDataset(dataset: Omit<Dataset, 'id' | 'uploadedAt'>, parquet: Uint8Array): Promise<Dataset>;
  dataset(id: string): Promise<Dataset | undefined>;
  /** the newest dataset of a channel: the one questions are about */
  currentDataset(channelId: string): Promise<Dataset | undefined>;
  datasets(channelId: string): Promise<readonly Dataset[]>;
  parquet(datasetId: string): Promise<Uint8Array>;
  /** keeps the words of the last question answered in a thread */
  rememberQuestion(channelId: string, threadTs: string | null, words: string): Promise<void>;
  /** the last question answered in this thread, else in the channel */
  lastQuestion(channelId: string, threadTs: string | null): Promise<string | undefined>;
  /** follows a question in a channel; one that is followed there already gets the new time */
  saveFollow(follow: Pick<Follow, 'channelId' | 'question' | 'time' | 'setBy' | 'nextDue'>): Promise<Follow>;
  follow(id: string): Promise<Follow | undefined>;
  /** what a channel follows, oldest first */
  follows(channelId: string): Promise<readonly Follow[]>;
  removeFollow(id: string): Promise<boolean>;
  /** keeps what a post showed (null: nothing new to keep), and takes the missed moments it told off the list */
  recordSeen(id: string, seen: Seen | null, told: readonly number[]): Promise<void>;
  /** remembers that a step of a job already posted, so that a repeated job does not post twice */
  postedTs(jobKey: string, step: string): Promise<string | undefined>;
  recordPosted(jobKey: string, step: string, ts: string): Promise<void>;
}

/** One thing that came in from the chat service, written down before it is acknowledged. */
export interface InboxEntry {
  /** the platform's event id, or a key of our own for commands and presses */
  readonly eventKey: string;
  /** what it is about (team + channel + file + message), since one human action can arrive as several events */
  readonly naturalKey: string;
  readonly teamId: string;
  readonly kind: string;
  readonly payload: unknown;
}

export interface Store {
  workspace(teamId: string, name?: string): Promise<WorkspaceStore>;
  /** writes the entry and its queue job in one transaction; 'seen' when the event or what it is about is already there */
  receive(entry: InboxEntry): Promise<'new' | 'seen'>;
  /** works entries from the queue, `concurrency` at a time; a thrown error is retried a few times with growing pauses, then kept as failed */
  work(
    handler: (
      entry: InboxEntry & {
        readonly attempt: number;
        readonly lastAttempt: boolean;
      },
    ) => Promise<void>,
    concurrency: number,
  ): Promise<void>;
  /** the weekly posts of all workspaces that are due at this moment */
  dueFollows(now: number): Promise<readonly DueFollow[]>;
  /** moves a weekly post on, once, whoever comes first */
  advanceFollow(due: Pick<DueFollow, 'teamId' | 'id' | 'due'>, next: number, missed: readonly number[]): Promise<void>;
  /** resolves when every received entry has been worked (or has failed for good); event driven, for tests and shutdown */
  drained(timeoutMs: number): Promise<void>;
  /** removes entries older than 7 days with their payload, unless still to be worked, and tidies the queue; call it now and then, about hourly */
  maintain(): Promise<{ readonly inbox: number; readonly posted: number }>;
  /** stops taking up entries, waits for the running ones (a little: what takes longer is put back), and closes; the folder is free afterwards */
  close(): Promise<void>;
}
