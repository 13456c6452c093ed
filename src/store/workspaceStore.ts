import { randomBytes } from 'node:crypto';
import { readColumn, settingsSchema } from './columns.ts';
import { datasetsOf } from './datasets.ts';
import { followsOf } from './follows.ts';
import { scopeOf } from './scope.ts';
import { asJson, type Sql } from './sql.ts';
import type { WorkspaceStore } from './types.ts';
import { uploadsOf } from './uploads.ts';

/**
 * What one workspace has stored; made known on first sight.
 * @param teamId the chat service's id of the workspace, not empty
 * @param name kept when given
 */
export async function workspaceStore(
  sql: Sql,
  teamId: string,
  name: string | undefined,
  now: () => number,
): Promise<WorkspaceStore> {
  const scope = scopeOf(sql, teamId);
  await scope.query(
    `INSERT INTO ebbline.workspaces AS known (team_id, name, created_at) VALUES ($1, $2, $3)
     ON CONFLICT (team_id) DO UPDATE SET name = coalesce(excluded.name, known.name)`,
    [name, new Date(now())],
  );
  return {
    teamId,
    ...uploadsOf(scope),
    ...datasetsOf(scope, now),
    ...followsOf(scope),

    async idKey() {
      // The first to come sets it; who comes second at the same moment gets the one that was set.
      const rows = await scope.query<{ id_key: string }>(
        'UPDATE ebbline.workspaces SET id_key = coalesce(id_key, $2) WHERE team_id = $1 RETURNING id_key',
        [randomBytes(32).toString('hex')],
      );
      return rows[0]!.id_key;
    },

    async settings(channelId) {
      const rows = await scope.query<{ settings: unknown }>(
        'SELECT settings FROM ebbline.channels WHERE team_id = $1 AND channel_id = $2',
        [channelId],
      );
      return rows[0] ? readColumn(settingsSchema, rows[0].settings, `the settings of channel ${channelId}`) : {};
    },

    async saveSettings(channelId, settings) {
      await scope.query(
        `INSERT INTO ebbline.channels (team_id, channel_id, settings) VALUES ($1, $2, $3)
         ON CONFLICT (team_id, channel_id) DO UPDATE SET settings = excluded.settings`,
        [channelId, asJson(settings)],
      );
    },

    async rememberQuestion(channelId, threadTs, words) {
      await scope.query(
        `INSERT INTO ebbline.asked (team_id, channel_id, thread_ts, words, asked_at) VALUES ($1, $2, $3, $4, $5)
         ON CONFLICT (team_id, channel_id, thread_ts) DO UPDATE SET words = excluded.words, asked_at = excluded.asked_at`,
        [channelId, threadTs ?? '', words, new Date(now())],
      );
    },

    async lastQuestion(channelId, threadTs) {
      const rows = await scope.query<{ words: string }>(
        `SELECT words FROM ebbline.asked WHERE team_id = $1 AND channel_id = $2
         ORDER BY (thread_ts = $3) DESC, asked_at DESC LIMIT 1`,
        [channelId, threadTs ?? ''],
      );
      return rows[0]?.words;
    },

    async postedTs(jobKey, step) {
      const rows = await scope.query<{ ts: string }>(
        'SELECT ts FROM ebbline.posted WHERE team_id = $1 AND job_key = $2 AND step = $3',
        [jobKey, step],
      );
      return rows[0]?.ts;
    },

    async recordPosted(jobKey, step, ts) {
      // Recorded twice: the first message is the one people answer to.
      await scope.query(
        `INSERT INTO ebbline.posted (team_id, job_key, step, ts, posted_at) VALUES ($1, $2, $3, $4, $5)
         ON CONFLICT (team_id, job_key, step) DO NOTHING`,
        [jobKey, step, ts, new Date(now())],
      );
    },
  };
}
