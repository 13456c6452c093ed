import type { Migration } from './types.ts';

/** What a channel follows: a question that is answered there by itself once a week. */
export const follows: Migration = {
  number: 3,
  name: 'weekly posts',
  sql: `
    CREATE TABLE ebbline.follows (
      team_id text NOT NULL REFERENCES ebbline.workspaces,
      id text NOT NULL,
      arrival bigint GENERATED ALWAYS AS IDENTITY,
      channel_id text NOT NULL,
      question text NOT NULL,
      time jsonb NOT NULL,
      set_by text NOT NULL,
      next_due timestamptz NOT NULL,
      missed jsonb NOT NULL,
      seen jsonb,
      PRIMARY KEY (team_id, id),
      UNIQUE (team_id, channel_id, question)
    );
    CREATE INDEX follows_due ON ebbline.follows (next_due);
  `,
};
