import type { Tenure } from '../census/types.ts';
import type { ChartKind } from '../charts/types.ts';
import type { Day } from '../days.ts';

/** "has churn moved?" with whatever the asker pinned down; everything left out is recommended from the data. */
export interface Question {
  readonly kind: 'ask';
  readonly tenure?: Tenure;
  readonly subgroupSize?: number;
  /** number of points the usual level is taken from */
  readonly baseline?: number;
  readonly segment?: { readonly column?: string; readonly value: string };
  /** judge what started from this day on against what started before it */
  readonly since?: Day;
  readonly asOf?: Day;
  readonly settleDays?: number;
  /** the kind of chart somebody insists on; else the one that fits */
  readonly chart?: ChartKind;
}

/** All that can be asked for in words so far. */
export type Request =
  | Question
  | { readonly kind: 'help' }
  /** what was read from the current export, and the means to mend it */
  | { readonly kind: 'data' };

export interface Understanding {
  readonly request: Request;
  /** the request put back into words, complete: "has churn at 6 months moved for “Orchard”, judging accounts that started from 1 March 2025 on against those before?" */
  readonly understood: string;
  /** pieces of the sentence that found no use, each with the nearest thing that can be done */
  readonly notUnderstood: readonly { readonly text: string; readonly nearest: string }[];
}

/** What the grammar may use to recognise words: the values that really occur in the data, and today for "since March". */
export interface RequestContext {
  readonly today: Day;
  readonly segments: readonly string[];
  readonly segmentColumn?: string;
  /** data-through date, when data is there: "since March" means the last March before it */
  readonly asOf?: Day;
}
