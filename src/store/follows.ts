import { randomUUID } from 'node:crypto';
import { readColumn, seenSchema, timeSchema, timesSchema } from './columns.ts';
import type { Scope } from './scope.ts';
import { asJson, type Database } from './sql.ts';
import type { DueFollow, Follow, WorkspaceStore } from './types.ts';

interface FollowRow {
  readonly id: string;
  readonly channel_id: string;
  readonly question: string;
  readonly time: unknown;
  readonly set_by: string;
  readonly next_due: Date;
  readonly missed: unknown;
  readonly seen: unknown;
}

const COLUMNS = 'id, channel_id, question, time, set_by, next_due, missed, seen';

/** What the channels of one workspace follow. */
export function followsOf(
  scope: Scope,
): Pick<WorkspaceStore, 'saveFollow' | 'follow' | 'follows' | 'removeFollow' | 'recordSeen'> {
  return {
    async saveFollow({ channelId, question, time, setBy, nextDue }) {
      const rows = await scope.query<FollowRow>(
        `INSERT INTO ebbline.follows AS kept (team_id, id, channel_id, question, time, set_by, next_due, missed)
         VALUES ($1, $2, $3, $4, $5, $6, $7, '[]')
         ON CONFLICT (team_id, channel_id, question)
           DO UPDATE SET time = excluded.time, set_by = excluded.set_by, next_due = excluded.next_due
         RETURNING ${COLUMNS}`,
        [randomUUID(), channelId, question, asJson(time), setBy, new Date(nextDue)],
      );
      return fromRow(rows[0]!);
    },

    async follow(id) {
      const rows = await scope.query<FollowRow>(
        `SELECT ${COLUMNS} FROM ebbline.follows WHERE team_id = $1 AND id = $2`,
        [id],
      );
      return rows[0] && fromRow(rows[0]);
    },

    async follows(channelId) {
      const rows = await scope.query<FollowRow>(
        `SELECT ${COLUMNS} FROM ebbline.follows WHERE team_id = $1 AND channel_id = $2 ORDER BY arrival`,
        [channelId],
      );
      return rows.map(fromRow);
    },

    async removeFollow(id) {
      const rows = await scope.query('DELETE FROM ebbline.follows WHERE team_id = $1 AND id = $2 RETURNING id', [id]);
      return rows.length > 0;
    },

    async recordSeen(id, seen, told) {
      // Only those that were told leave the list: another may have been missed meanwhile.
      await scope.query(
        `UPDATE ebbline.follows SET seen = coalesce($3, seen),
           missed = coalesce((SELECT jsonb_agg(one) FROM jsonb_array_elements(missed) AS one WHERE NOT $4::jsonb @> one), '[]')
         WHERE team_id = $1 AND id = $2`,
        [id, seen === null ? null : asJson(seen), asJson(told)],
      );
    },
  };
}

function fromRow(row: FollowRow): Follow {
  const where = `the weekly post ${row.id}`;
  return {
    id: row.id,
    channelId: row.channel_id,
    question: row.question,
    time: readColumn(timeSchema, row.time, `the time of ${where}`),
    setBy: row.set_by,
    nextDue: row.next_due.getTime(),
    missed: readColumn(timesSchema, row.missed, `what was missed of ${where}`),
    seen: row.seen === null ? null : readColumn(seenSchema, row.seen, `what was last seen of ${where}`),
  };
}

/** The posts of all workspaces that are due, longest due first. */
export async function dueFollows(database: Database, now: number): Promise<DueFollow[]> {
  const rows = await database.query<{ team_id: string; id: string; time: unknown; next_due: Date }>(
    'SELECT team_id, id, time, next_due FROM ebbline.follows WHERE next_due <= $1 ORDER BY next_due LIMIT 200',
    [new Date(now)],
  );
  return rows.map((row) => ({
    teamId: row.team_id,
    id: row.id,
    time: readColumn(timeSchema, row.time, `the time of the weekly post ${row.id}`),
    due: row.next_due.getTime(),
  }));
}

/**
 * Moves a post on to its next time, unless another process already has, or its time was changed meanwhile.
 * @param missed moments that passed without a post, to be named in the next one
 */
export async function advanceFollow(
  database: Database,
  { teamId, id, due }: Pick<DueFollow, 'teamId' | 'id' | 'due'>,
  next: number,
  missed: readonly number[],
): Promise<void> {
  await database.query(
    'UPDATE ebbline.follows SET next_due = $4, missed = missed || $5::jsonb WHERE team_id = $1 AND id = $2 AND next_due = $3',
    [teamId, id, new Date(due), new Date(next), asJson(missed)],
  );
}
