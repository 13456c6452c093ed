import type { ExportChange, ReadOptions } from '../accounts/types.ts';
import type { EbbError } from '../errors.ts';
import type { Question, SideQuestion } from '../requests/types.ts';
import type { Dataset, Upload, WorkspaceStore } from '../store/types.ts';
import type { Reply } from './questions/types.ts';
import type { Answer } from './types.ts';

export type Ingested =
  | {
      readonly kind: 'read';
      readonly dataset: Dataset;
      /** against the dataset the channel had before; null when there was none, or nothing to compare by */
      readonly change: { readonly name: string; readonly change: ExportChange } | null;
      readonly upload: Upload;
    }
  /** the file is sound but a person must decide: how the dates read */
  | { readonly kind: 'asks'; readonly error: EbbError; readonly upload: Upload }
  | {
      readonly kind: 'refused';
      readonly error: EbbError;
      readonly upload: Upload;
    };

/** The use cases the channel calls. It knows no statistics and no SQL. */
export interface Answers {
  /** reads a file already on disk, stores the dataset, moves the upload to its new state; never throws for a bad file */
  ingest(workspace: WorkspaceStore, upload: Upload, path: string, options: ReadOptions): Promise<Ingested>;
  /** answers from the channel's current dataset; throws EbbError DATASET_MISSING when there is none */
  ask(workspace: WorkspaceStore, channelId: string, question: Question): Promise<Answer>;
  /** answers for one dataset */
  askDataset(workspace: WorkspaceStore, dataset: Dataset, question: Question): Promise<Answer>;
  /** answers one of the questions around the verdict, for one dataset */
  askSide(workspace: WorkspaceStore, dataset: Dataset, request: SideQuestion): Promise<Reply>;
  close(): Promise<void>;
}
