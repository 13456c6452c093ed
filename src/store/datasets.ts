import { randomUUID } from 'node:crypto';
import { EbbError } from '../errors.ts';
import { choicesSchema, readColumn, reportSchema } from './columns.ts';
import type { Scope } from './scope.ts';
import { asJson } from './sql.ts';
import type { Dataset, WorkspaceStore } from './types.ts';

interface DatasetRow {
  readonly id: string;
  readonly channel_id: string;
  readonly name: string;
  readonly file_id: string | null;
  readonly uploaded_by: string;
  readonly uploaded_at: Date;
  readonly choices: unknown;
  readonly report: unknown;
}

// Everything but the Parquet, which is fetched only when it is to be counted.
const COLUMNS = 'id, channel_id, name, file_id, uploaded_by, uploaded_at, choices, report';

/** The datasets of one workspace. */
export function datasetsOf(
  scope: Scope,
  now: () => number,
): Pick<WorkspaceStore, 'saveDataset' | 'dataset' | 'currentDataset' | 'datasets' | 'parquet'> {
  return {
    async saveDataset(dataset, parquet) {
      const rows = await scope.query<DatasetRow>(
        `INSERT INTO ebbline.datasets (team_id, ${COLUMNS}, parquet) VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10)
         RETURNING ${COLUMNS}`,
        [
          randomUUID(),
          dataset.channelId,
          dataset.name,
          dataset.fileId,
          dataset.uploadedBy,
          new Date(now()),
          asJson(dataset.choices),
          asJson(dataset.report),
          parquet,
        ],
      );
      return fromRow(rows[0]!);
    },

    async dataset(id) {
      const rows = await scope.query<DatasetRow>(
        `SELECT ${COLUMNS} FROM ebbline.datasets WHERE team_id = $1 AND id = $2`,
        [id],
      );
      return rows[0] && fromRow(rows[0]);
    },

    async currentDataset(channelId) {
      const rows = await scope.query<DatasetRow>(
        `SELECT ${COLUMNS} FROM ebbline.datasets WHERE team_id = $1 AND channel_id = $2 ORDER BY arrival DESC LIMIT 1`,
        [channelId],
      );
      return rows[0] && fromRow(rows[0]);
    },

    async datasets(channelId) {
      const rows = await scope.query<DatasetRow>(
        `SELECT ${COLUMNS} FROM ebbline.datasets WHERE team_id = $1 AND channel_id = $2 ORDER BY arrival DESC`,
        [channelId],
      );
      return rows.map(fromRow);
    },

    async parquet(datasetId) {
      const rows = await scope.query<{ parquet: Uint8Array }>(
        'SELECT parquet FROM ebbline.datasets WHERE team_id = $1 AND id = $2',
        [datasetId],
      );
      if (rows[0]) return rows[0].parquet;
      throw new EbbError(
        'DATASET_MISSING',
        `there is no dataset ${datasetId} in this workspace`,
        'Drop the export into the channel again.',
      );
    },
  };
}

function fromRow(row: DatasetRow): Dataset {
  return {
    id: row.id,
    channelId: row.channel_id,
    name: row.name,
    fileId: row.file_id,
    uploadedBy: row.uploaded_by,
    uploadedAt: row.uploaded_at,
    choices: readColumn(choicesSchema, row.choices, `the choices of dataset ${row.id}`),
    report: readColumn(reportSchema, row.report, `the report of dataset ${row.id}`),
  };
}
