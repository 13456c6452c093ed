import type { Migration } from './types.ts';

/** The last question answered in each thread, so that "explain" knows what it is about. */
export const asked: Migration = {
  number: 2,
  name: 'questions answered',
  sql: `
    CREATE TABLE ebbline.asked (
      team_id text NOT NULL REFERENCES ebbline.workspaces,
      channel_id text NOT NULL,
      thread_ts text NOT NULL,
      words text NOT NULL,
      asked_at timestamptz NOT NULL,
      PRIMARY KEY (team_id, channel_id, thread_ts)
    );
    CREATE INDEX asked_newest ON ebbline.asked (team_id, channel_id, asked_at DESC);
  `,
};
