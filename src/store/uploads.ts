import { randomUUID } from 'node:crypto';
import { choicesSchema, headersSchema, readColumn } from './columns.ts';
import type { Scope } from './scope.ts';
import { asJson } from './sql.ts';
import type { Upload, UploadState, WorkspaceStore } from './types.ts';

interface UploadRow {
  readonly id: string;
  readonly channel_id: string;
  readonly file_id: string;
  readonly file_name: string;
  readonly uploaded_by: string;
  readonly thread_ts: string;
  readonly state: UploadState;
  readonly choices: unknown;
  readonly dataset_id: string | null;
  readonly headers: unknown;
}

const COLUMNS = 'id, channel_id, file_id, file_name, uploaded_by, thread_ts, state, choices, dataset_id, headers';

/** The uploads of one workspace. */
export function uploadsOf(
  scope: Scope,
): Pick<WorkspaceStore, 'saveUpload' | 'updateUpload' | 'upload' | 'uploadInThread'> {
  const find = async (id: string): Promise<Upload | undefined> => {
    const rows = await scope.query<UploadRow>(`SELECT ${COLUMNS} FROM ebbline.uploads WHERE team_id = $1 AND id = $2`, [
      id,
    ]);
    return rows[0] && fromRow(rows[0]);
  };
  return {
    upload: find,

    async saveUpload(upload) {
      const rows = await scope.query<UploadRow>(
        `INSERT INTO ebbline.uploads (team_id, ${COLUMNS}) VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11)
         RETURNING ${COLUMNS}`,
        [
          randomUUID(),
          upload.channelId,
          upload.fileId,
          upload.fileName,
          upload.uploadedBy,
          upload.threadTs,
          upload.state,
          asJson(upload.choices),
          upload.datasetId,
          asJson(upload.headers),
        ],
      );
      return fromRow(rows[0]!);
    },

    async updateUpload(id, change) {
      // NULL means "as it was", except for the dataset, which may really become NULL: whether it changes is told apart.
      const rows = await scope.query<UploadRow>(
        `UPDATE ebbline.uploads SET
           file_name = coalesce($3, file_name),
           uploaded_by = coalesce($4, uploaded_by),
           thread_ts = coalesce($5, thread_ts),
           state = coalesce($6, state),
           choices = coalesce($7::jsonb, choices),
           headers = coalesce($8::jsonb, headers),
           dataset_id = CASE WHEN $9::boolean THEN $10 ELSE dataset_id END
         WHERE team_id = $1 AND id = $2
         RETURNING ${COLUMNS}`,
        [
          id,
          change.fileName,
          change.uploadedBy,
          change.threadTs,
          change.state,
          change.choices && asJson(change.choices),
          change.headers && asJson(change.headers),
          change.datasetId !== undefined,
          change.datasetId,
        ],
      );
      if (!rows[0]) throw new Error(`there is no upload ${id} in this workspace`);
      return fromRow(rows[0]);
    },

    async uploadInThread(channelId, threadTs) {
      const rows = await scope.query<UploadRow>(
        `SELECT ${COLUMNS} FROM ebbline.uploads WHERE team_id = $1 AND channel_id = $2 AND thread_ts = $3
         ORDER BY arrival DESC LIMIT 1`,
        [channelId, threadTs],
      );
      return rows[0] && fromRow(rows[0]);
    },
  };
}

function fromRow(row: UploadRow): Upload {
  return {
    id: row.id,
    channelId: row.channel_id,
    fileId: row.file_id,
    fileName: row.file_name,
    uploadedBy: row.uploaded_by,
    threadTs: row.thread_ts,
    state: row.state,
    choices: readColumn(choicesSchema, row.choices, `the choices of upload ${row.id}`),
    datasetId: row.dataset_id,
    headers: readColumn(headersSchema, row.headers, `the headers of upload ${row.id}`),
  };
}
