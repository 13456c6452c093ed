import type { Migration } from './types.ts';

/**
 * Every table that belongs to a workspace has the team id first in its key, and refers to others by team and id together:
 * a row of one workspace cannot even point at a row of another.
 */
export const first: Migration = {
  number: 1,
  name: 'workspaces, channels, datasets, uploads, inbox, posted',
  sql: `
    CREATE TABLE ebbline.workspaces (
      team_id text PRIMARY KEY CHECK (team_id <> ''),
      name text,
      id_key text,
      created_at timestamptz NOT NULL
    );

    CREATE TABLE ebbline.channels (
      team_id text NOT NULL REFERENCES ebbline.workspaces,
      channel_id text NOT NULL,
      settings jsonb NOT NULL,
      PRIMARY KEY (team_id, channel_id)
    );

    CREATE TABLE ebbline.datasets (
      team_id text NOT NULL REFERENCES ebbline.workspaces,
      id text NOT NULL,
      arrival bigint GENERATED ALWAYS AS IDENTITY,
      channel_id text NOT NULL,
      name text NOT NULL,
      file_id text,
      uploaded_by text NOT NULL,
      uploaded_at timestamptz NOT NULL,
      choices jsonb NOT NULL,
      report jsonb NOT NULL,
      parquet bytea NOT NULL,
      PRIMARY KEY (team_id, id)
    );
    -- Parquet is compressed already: trying again would only cost time.
    ALTER TABLE ebbline.datasets ALTER COLUMN parquet SET STORAGE EXTERNAL;
    CREATE INDEX datasets_newest ON ebbline.datasets (team_id, channel_id, arrival DESC);

    CREATE TABLE ebbline.uploads (
      team_id text NOT NULL REFERENCES ebbline.workspaces,
      id text NOT NULL,
      arrival bigint GENERATED ALWAYS AS IDENTITY,
      channel_id text NOT NULL,
      file_id text NOT NULL,
      file_name text NOT NULL,
      uploaded_by text NOT NULL,
      thread_ts text NOT NULL,
      state text NOT NULL CHECK (state IN ('received', 'asks', 'read', 'refused')),
      choices jsonb NOT NULL,
      dataset_id text,
      headers jsonb NOT NULL,
      PRIMARY KEY (team_id, id),
      FOREIGN KEY (team_id, dataset_id) REFERENCES ebbline.datasets (team_id, id)
    );
    CREATE INDEX uploads_in_thread ON ebbline.uploads (team_id, channel_id, thread_ts, arrival DESC);

    CREATE TABLE ebbline.inbox (
      team_id text NOT NULL CHECK (team_id <> ''),
      event_key text NOT NULL CHECK (event_key <> ''),
      natural_key text NOT NULL CHECK (natural_key <> ''),
      kind text NOT NULL,
      -- json, not jsonb: kept to the letter, whatever characters the chat service sent
      payload json NOT NULL,
      received_at timestamptz NOT NULL,
      job_id uuid NOT NULL,
      PRIMARY KEY (team_id, event_key),
      UNIQUE (team_id, natural_key)
    );
    CREATE INDEX inbox_received ON ebbline.inbox (received_at);

    CREATE TABLE ebbline.posted (
      team_id text NOT NULL REFERENCES ebbline.workspaces,
      job_key text NOT NULL,
      step text NOT NULL,
      ts text NOT NULL,
      posted_at timestamptz NOT NULL,
      PRIMARY KEY (team_id, job_key, step)
    );
    CREATE INDEX posted_when ON ebbline.posted (posted_at);
  `,
};
