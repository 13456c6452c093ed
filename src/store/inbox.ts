import { randomUUID } from 'node:crypto';
import { z } from 'zod';
import { JOBS_SCHEMA, type Queue, type TakenJob } from './queue.ts';
import type { Database } from './sql.ts';
import type { InboxEntry } from './types.ts';

const DAY_MS = 86_400_000;
/** The chat service repeats an event for at most some hours; a week leaves room for a person who looks into a failed entry. */
const INBOX_DAYS = 7;
/** Longer than any job lives in the queue (14 days), so that a late repeat still finds what it already posted. */
const POSTED_DAYS = 30;
/** The last question of a thread nobody wrote in for this long is not asked about any more. */
const ASKED_DAYS = 400;

const key = z.string().min(1);
const entrySchema = z.object({
  eventKey: key,
  naturalKey: key,
  teamId: key,
  kind: key,
  payload: z.unknown(),
});

/**
 * Writes the entry and its job down in one transaction.
 * @returns 'seen', and nothing is written, when the workspace already has an entry of this event, or about the same thing
 * @throws ZodError when a key is missing or empty: an entry without one could be told apart from no other
 */
export async function receiveEntry(
  database: Database,
  queue: Queue,
  entry: InboxEntry,
  now: () => number,
): Promise<'new' | 'seen'> {
  const { teamId, eventKey, naturalKey, kind, payload } = entrySchema.parse(entry);
  return database.transaction(async (tx) => {
    const jobId = randomUUID();
    const written = await tx.query(
      `INSERT INTO ebbline.inbox (team_id, event_key, natural_key, kind, payload, received_at, job_id)
       VALUES ($1, $2, $3, $4, $5, $6, $7) ON CONFLICT DO NOTHING RETURNING job_id`,
      [teamId, eventKey, naturalKey, kind, JSON.stringify(payload ?? null), new Date(now()), jobId],
    );
    if (written.length === 0) return 'seen';
    await queue.add(tx, jobId, { teamId, eventKey });
    return 'new';
  });
}

/** The entry a job is about; undefined when it has been removed. */
export async function entryOf(database: Database, job: TakenJob): Promise<InboxEntry | undefined> {
  const rows = await database.query<{
    natural_key: string;
    kind: string;
    payload: unknown;
  }>('SELECT natural_key, kind, payload FROM ebbline.inbox WHERE team_id = $1 AND event_key = $2', [
    job.teamId,
    job.eventKey,
  ]);
  const row = rows[0];
  return (
    row && {
      teamId: job.teamId,
      eventKey: job.eventKey,
      naturalKey: row.natural_key,
      kind: row.kind,
      payload: row.payload,
    }
  );
}

/** Removes what is old: entries with their payload, unless still to be worked, and the memory of what was posted. Returns how many rows. */
export async function removeOld(database: Database, now: () => number): Promise<{ inbox: number; posted: number }> {
  const inbox = await database.query(
    `DELETE FROM ebbline.inbox WHERE received_at < $1 AND NOT EXISTS (
       SELECT FROM ${JOBS_SCHEMA}.job WHERE job.id = inbox.job_id AND job.state < 'completed')
     RETURNING event_key`,
    [new Date(now() - INBOX_DAYS * DAY_MS)],
  );
  const posted = await database.query('DELETE FROM ebbline.posted WHERE posted_at < $1 RETURNING step', [
    new Date(now() - POSTED_DAYS * DAY_MS),
  ]);
  await database.query('DELETE FROM ebbline.asked WHERE asked_at < $1', [new Date(now() - ASKED_DAYS * DAY_MS)]);
  return { inbox: inbox.length, posted: posted.length };
}
