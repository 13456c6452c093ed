/** Accounts that started in one month and ended in another; months are whole numbers in order, `lost` null while they are customers. */
export interface FlowCell {
  readonly started: number;
  readonly lost: number | null;
  readonly accounts: number;
}

/** Customers over a run of whole months. start + added - lost = end. */
export interface Flow {
  readonly first: number;
  readonly last: number;
  /** customers on the first day, before anybody joins or leaves on it */
  readonly start: number;
  readonly added: number;
  /** all who left, those who joined within the run counted too */
  readonly lost: number;
  /** those of them who were customers at the start */
  readonly lostOfStart: number;
  readonly end: number;
}

/**
 * Customers at the start, joined, lost and at the end of the months first to last, both counted.
 * An account that joins and leaves within the run is both added and lost.
 */
export function flow(cells: readonly FlowCell[], first: number, last: number): Flow {
  let start = 0;
  let added = 0;
  let lost = 0;
  let lostOfStart = 0;
  for (const cell of cells) {
    const gone = cell.lost !== null && cell.lost >= first && cell.lost <= last;
    if (cell.started < first && (cell.lost === null || cell.lost >= first)) {
      start += cell.accounts;
      if (gone) lostOfStart += cell.accounts;
    }
    if (cell.started >= first && cell.started <= last) added += cell.accounts;
    if (gone) lost += cell.accounts;
  }
  return { first, last, start, added, lost, lostOfStart, end: start + added - lost };
}
