/** One step of the schema, forward only. Once released it is never edited: a change is a new step. */
export interface Migration {
  /** 1, 2, 3, … without gaps */
  readonly number: number;
  readonly name: string;
  readonly sql: string;
}
