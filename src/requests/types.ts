import type { CensusView, Tenure } from '../census/types.ts';
import type { ChartKind, ShiftTest } from '../charts/types.ts';
import type { Day } from '../days.ts';

/** Which accounts, at which age, counted how: what any question may pin down; everything left out is recommended from the data. */
export interface Scope {
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
  /** how accounts are ordered and cut; by start when absent */
  readonly view?: CensusView;
  /** shift tests that decide; all of them when absent. Set by options and settings, not in words. */
  readonly tests?: readonly ShiftTest[];
}

/** "has churn moved?" */
export interface Question extends Scope {
  readonly kind: 'ask';
}

/** The questions that come before and after "has it moved?". */
export type SideQuestion = Scope &
  (
    | { readonly kind: 'where' }
    | { readonly kind: 'revenue' }
    | { readonly kind: 'worth' }
    | { readonly kind: 'spread' }
    | { readonly kind: 'explain' }
    /** `move`: the change that should be seen, as a factor on the rate (0.5 a halving); `within`: points it should take */
    | { readonly kind: 'plan'; readonly move?: number; readonly within?: number }
    /** `move`: the change the watch is designed for, as a factor on the rate, or `to`: the rate it leads to; by half in both directions when absent */
    | { readonly kind: 'early'; readonly move?: number; readonly to?: number }
    /** `rate`: the figure somebody reported; `decimals`: of the percentage as it was given; `month`: first day of the month it is about */
    | { readonly kind: 'reconcile'; readonly rate: number; readonly decimals: number; readonly month?: Day }
    | { readonly kind: 'target'; readonly rate: number }
  );

export type SideKind = SideQuestion['kind'];
export type SideQuestionOf<K extends SideKind> = Extract<SideQuestion, { readonly kind: K }>;

/** A moment that comes once a week on the clock of a place. */
export interface WeeklyTime {
  /** 1 Monday to 7 Sunday */
  readonly weekday: number;
  readonly hour: number;
  readonly minute: number;
  /** IANA name, such as "Europe/Vienna" */
  readonly zone: string;
}

/** What is asked about the posts a channel gets by itself. */
export type WeeklyRequest =
  /** set or changed; zone absent: the setter's own */
  | {
      readonly kind: 'weekly-set';
      readonly time: Omit<WeeklyTime, 'zone'> & { readonly zone?: string };
      readonly question: Question;
    }
  | { readonly kind: 'weekly-show' }
  /** `which`: one of several, from 1; null for all */
  | { readonly kind: 'weekly-stop'; readonly which: number | null };

/** All that can be asked for in words. */
export type Request =
  | Question
  | SideQuestion
  | WeeklyRequest
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
