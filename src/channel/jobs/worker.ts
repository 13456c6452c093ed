import type { WebClient } from '@slack/web-api';
import { EbbError } from '../../errors.ts';
import type { InboxEntry } from '../../store/types.ts';
import { hostRule } from '../download/hosts.ts';
import { type Work, workOf } from '../inbox.ts';
import { errorMessage, unexpectedMessage } from '../messages/errorMessage.ts';
import { joinedMessage } from '../messages/plainMessages.ts';
import type { Place } from '../posting/poster.ts';
import { mayPass, refusal } from '../posting/webClient.ts';
import type { ChannelDeps } from '../types.ts';
import { answerAsk } from './answerAsk.ts';
import { type Job, posterFor } from './context.ts';
import { inOrder } from './inOrder.ts';
import { workCommand } from './workCommand.ts';
import { workFile, workFileShared } from './workFile.ts';
import { workDateOrder, workMend } from './workMend.ts';
import { workWeekly } from './workWeekly.ts';

export type Handler = (
  entry: InboxEntry & { readonly attempt: number; readonly lastAttempt: boolean },
) => Promise<void>;

/**
 * Works the entries of the inbox. What may pass (the network, an overloaded service, a database that is away) is thrown, so that the
 * queue tries again; anything else is told in the thread at once, because trying again would fail again.
 */
export function createHandler(deps: ChannelDeps, client: WebClient, posting: WebClient): Handler {
  const rule = hostRule(deps.slack.apiUrl);
  const ordered = inOrder();
  return (entry) =>
    ordered(orderKey(entry), async () => {
      const log = deps.log.child({ team: entry.teamId, kind: entry.kind, event: entry.eventKey });
      const workspace = await deps.store.workspace(entry.teamId);
      const job: Job = {
        deps,
        client,
        posting,
        rule,
        workspace,
        teamId: entry.teamId,
        jobKey: entry.eventKey,
        again: entry.attempt > 1,
        log,
      };
      let work: Work | undefined;
      try {
        work = workOf(entry);
        await run(job, work);
      } catch (error) {
        if (passes(error) && !entry.lastAttempt) {
          log.warn({ err: error, attempt: entry.attempt }, 'this did not work for now; it will be tried again');
          throw error;
        }
        await tell(job, work, error);
        if (passes(error)) throw error;
      }
    });
}

function orderKey(entry: InboxEntry): string {
  // It only looks up where a file stands, and may have to wait for the service to know.
  if (entry.kind === 'file-shared') return entry.eventKey;
  const channel = (entry.payload as { channel?: unknown } | null)?.channel;
  return `${entry.teamId}|${typeof channel === 'string' ? channel : ''}`;
}

async function run(job: Job, work: Work): Promise<void> {
  switch (work.kind) {
    case 'ask':
      return answerAsk(job, posterFor(job, work.payload), work.payload.text, work.payload.user);
    case 'command':
      return workCommand(job, work.payload);
    case 'file':
      return workFile(job, work.payload);
    case 'file-shared':
      return workFileShared(job, work.payload);
    case 'joined':
      await posterFor(job, { channel: work.payload.channel, threadTs: null }).post('joined', joinedMessage());
      return;
    case 'date-order':
      return workDateOrder(job, work.payload);
    case 'weekly':
      return workWeekly(job, work.payload);
    case 'mend':
      return workMend(job, work.payload);
  }
}

/** Says in the thread that something went wrong. Details stay in the log. */
async function tell(job: Job, work: Work | undefined, error: unknown): Promise<void> {
  const reference = Array.from({ length: 6 }, () => LETTERS[Math.floor(job.deps.random() * LETTERS.length)]).join('');
  const deliberate = error instanceof EbbError;
  job.log.error(
    { err: error, reference, refusal: refusal(error) },
    deliberate ? 'told in the channel' : 'something unexpected',
  );
  const place = work && placeOf(work);
  if (!place) return;
  try {
    await posterFor(job, place).replace(
      'failed',
      'reading',
      deliberate ? errorMessage(error) : unexpectedMessage(reference),
    );
  } catch (second) {
    // Not in the channel, archived, no rights: there is nobody to tell.
    job.log.warn(
      { refusal: refusal(second) ?? String(second), reference },
      'the failure could not be told in the channel',
    );
  }
}

/** Without letters and digits that are taken for one another. */
const LETTERS = 'ABCDEFGHJKLMNPQRSTUVWXYZ23456789';

function placeOf(work: Work): Place | undefined {
  switch (work.kind) {
    case 'ask':
    case 'file':
    case 'mend':
    case 'date-order':
      return { channel: work.payload.channel, threadTs: work.payload.threadTs };
    case 'command':
      return { channel: work.payload.channel, threadTs: null };
    case 'file-shared':
    case 'joined':
    case 'weekly':
      return undefined;
  }
}

const NETWORK = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'EPIPE',
  'ETIMEDOUT',
  'ENOTFOUND',
  'EAI_AGAIN',
  'UND_ERR_SOCKET',
]);

function passes(error: unknown): boolean {
  if (mayPass(error)) return true;
  if (error instanceof EbbError) return error.detail['mayPass'] === true;
  const { code, cause } = (error ?? {}) as { code?: unknown; cause?: unknown };
  // Classes 08 and 57 of SQLSTATE: the connection broke, or the server is shutting down. Source: PostgreSQL documentation, appendix A.
  if (typeof code === 'string' && (NETWORK.has(code) || /^(08|57)[0-9A-Z]{3}$/.test(code))) return true;
  return cause !== undefined && cause !== error && passes(cause);
}
