import type { WebClient } from '@slack/web-api';
import type { Logger } from 'pino';
import type { RequestContext } from '../../requests/types.ts';
import type { Dataset, WorkspaceStore } from '../../store/types.ts';
import type { HostRule } from '../download/hosts.ts';
import type { Place, Poster } from '../posting/poster.ts';
import { poster } from '../posting/poster.ts';
import type { ChannelDeps } from '../types.ts';

/** What the work on one entry needs. */
export interface Job {
  readonly deps: ChannelDeps;
  readonly client: WebClient;
  /** tries each call once only: for posting */
  readonly posting: WebClient;
  readonly rule: HostRule;
  readonly workspace: WorkspaceStore;
  readonly teamId: string;
  readonly jobKey: string;
  /** an earlier attempt at the same work may have got part of the way */
  readonly again: boolean;
  readonly log: Logger;
}

export function posterFor(job: Job, place: Place): Poster {
  return poster(job.client, job.posting, job.workspace, job.jobKey, place, job.again);
}

const DAY_MS = 86_400_000;

/** What the grammar may know: the values of the current data, and which day it is. */
export function requestContext(now: number, dataset: Dataset | undefined): RequestContext {
  const report = dataset?.report;
  const column = report?.columns.segment;
  return {
    today: Math.floor(now / DAY_MS),
    segments: report?.segments.map((one) => one.value) ?? [],
    ...(column === undefined ? {} : { segmentColumn: column }),
    ...(report === undefined ? {} : { asOf: report.asOf }),
  };
}

/** The dataset a question is about: that of the file in whose thread it is asked, else the channel's newest. */
export async function datasetFor(workspace: WorkspaceStore, place: Place): Promise<Dataset | undefined> {
  const upload = place.threadTs === null ? undefined : await workspace.uploadInThread(place.channel, place.threadTs);
  const own = upload?.datasetId ? await workspace.dataset(upload.datasetId) : undefined;
  return own ?? (await workspace.currentDataset(place.channel));
}
