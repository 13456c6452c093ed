import { compareExports } from '../accounts/compareExports.ts';
import { openEngine } from '../accounts/engine.ts';
import { loadAccounts, writeAccounts } from '../accounts/parquet.ts';
import { readExport } from '../accounts/readExport.ts';
import type { AccountTable } from '../accounts/types.ts';
import { EbbError } from '../errors.ts';
import type { Dataset, WorkspaceStore } from '../store/types.ts';
import { answerQuestion } from './answerQuestion.ts';
import { answerSide } from './questions/answerSide.ts';
import type { Answers, Ingested } from './useCases.ts';

type Engine = Awaited<ReturnType<typeof openEngine>>;

export interface AnswersDeps {
  /** a clock in milliseconds, for timing figures only */
  readonly clock: () => number;
}

interface Ready {
  users: number;
  readonly loaded: Promise<{
    readonly engine: Engine;
    readonly table: AccountTable;
  }>;
}

async function loadDataset(
  workspace: WorkspaceStore,
  dataset: Dataset,
): Promise<{ engine: Engine; table: AccountTable }> {
  const engine = await openEngine();
  try {
    return {
      engine,
      table: await loadAccounts(engine, await workspace.parquet(dataset.id), dataset.report),
    };
  } catch (error) {
    await engine.close();
    throw error;
  }
}

/** Datasets kept ready in the engine; the least recently asked about makes room. */
const TABLES_KEPT = 6;

/** Wires the parts that read, count, chart, judge and draw into the use cases the channel calls. */
export function createAnswers(deps: AnswersDeps): Answers {
  const { clock } = deps;
  const ready = new Map<string, Ready>();

  /** Hands `use` the dataset's accounts; nothing is closed while somebody is still counting in it. */
  async function withAccounts<T>(
    workspace: WorkspaceStore,
    dataset: Dataset,
    use: (table: AccountTable) => Promise<T>,
  ): Promise<T> {
    const key = `${workspace.teamId}:${dataset.id}`;
    const entry = ready.get(key) ?? {
      users: 0,
      loaded: loadDataset(workspace, dataset),
    };
    // Set again, so that the map's order is the order of last use.
    ready.delete(key);
    ready.set(key, entry);
    entry.users++;
    try {
      const { table } = await entry.loaded;
      return await use(table);
    } catch (error) {
      // A dataset that could not be loaded must not stay broken for the next asker.
      if (
        ready.get(key) === entry &&
        (await entry.loaded.then(
          () => false,
          () => true,
        ))
      )
        ready.delete(key);
      throw error;
    } finally {
      entry.users--;
      await makeRoom();
    }
  }

  async function makeRoom(): Promise<void> {
    for (const [key, entry] of ready) {
      if (ready.size <= TABLES_KEPT) return;
      if (entry.users > 0) continue;
      ready.delete(key);
      await entry.loaded.then(
        ({ engine }) => engine.close(),
        () => undefined,
      );
    }
  }

  const answers: Answers = {
    async ingest(workspace, upload, path, options): Promise<Ingested> {
      const engine = await openEngine();
      try {
        const table = await readExport(engine, path, {
          ...options,
          idKey: await workspace.idKey(),
        });
        const earlier = await workspace.currentDataset(upload.channelId);
        // The same file read again in another way is no newer export.
        const compared =
          earlier && earlier.fileId !== upload.fileId
            ? await compareExports(engine, table, await workspace.parquet(earlier.id), earlier.report)
            : null;
        const parquet = await writeAccounts(engine, table);
        const dataset = await workspace.saveDataset(
          {
            channelId: upload.channelId,
            name: upload.fileName,
            fileId: upload.fileId,
            uploadedBy: upload.uploadedBy,
            choices: upload.choices,
            report: table.report,
          },
          parquet,
        );
        const updated = await workspace.updateUpload(upload.id, {
          state: 'read',
          datasetId: dataset.id,
          headers: table.report.headers,
        });
        return {
          kind: 'read',
          dataset,
          upload: updated,
          change: compared && earlier ? { name: earlier.name, change: compared } : null,
        };
      } catch (error) {
        if (!(error instanceof EbbError) || error.kind !== 'input') throw error;
        const asks = error.code === 'DATES_AMBIGUOUS';
        const headers = error.detail['headers'];
        const updated = await workspace.updateUpload(upload.id, {
          state: asks ? 'asks' : 'refused',
          ...(Array.isArray(headers) ? { headers: headers as string[] } : {}),
        });
        return { kind: asks ? 'asks' : 'refused', error, upload: updated };
      } finally {
        await engine.close();
      }
    },

    async ask(workspace, channelId, question) {
      const dataset = await workspace.currentDataset(channelId);
      if (!dataset) {
        throw new EbbError(
          'DATASET_MISSING',
          'nothing has been handed in here yet, so there is nothing to count',
          'Drop an export of your accounts into this channel: a CSV with an id, a start date and an end date for each account.',
        );
      }
      return answers.askDataset(workspace, dataset, question);
    },

    async askDataset(workspace, dataset, question) {
      const begun = clock();
      return withAccounts(workspace, dataset, (table) =>
        answerQuestion(table, question, {
          subject: dataset.name,
          picture: true,
          clock,
          readMs: clock() - begun,
        }),
      );
    },

    async askSide(workspace, dataset, request) {
      const begun = clock();
      const { reply } = await withAccounts(workspace, dataset, (table) =>
        answerSide(table, request, { subject: dataset.name, picture: true, clock, readMs: clock() - begun }),
      );
      return reply;
    },

    async close() {
      const held = [...ready.values()];
      ready.clear();
      for (const { loaded } of held) {
        await loaded.then(
          ({ engine }) => engine.close(),
          () => undefined,
        );
      }
    },
  };
  return answers;
}
