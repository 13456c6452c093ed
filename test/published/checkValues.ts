import file from './checkValues.json' with { type: 'json' };

/** How a value was checked; see `about` in the file. */
export type Verified = 'seen-in-source' | 'seen-in-secondary-source' | 'recomputed' | 'memory-only';

export interface CheckValue<Inputs, Expected> {
  readonly id: string;
  readonly inputs: Inputs;
  readonly expected: Expected;
  readonly tolerance: number;
  readonly source: string;
  /** the source with the way it was checked, for the name of a test */
  readonly cited: string;
}

interface Entry {
  readonly id: string;
  readonly inputs: unknown;
  readonly expected: unknown;
  readonly tolerance: number | null;
  readonly source: string;
  readonly verified: readonly string[];
}

const entries = file.entries as readonly Entry[];

export function checkValue<Inputs, Expected>(id: string): CheckValue<Inputs, Expected> {
  const entry = entries.find((one) => one.id === id);
  if (!entry) throw new Error(`checkValues.json has no entry "${id}"`);
  return {
    id,
    inputs: entry.inputs as Inputs,
    expected: entry.expected as Expected,
    tolerance: entry.tolerance ?? 0,
    source: entry.source,
    cited: `${entry.source.split(';')[0]} [${entry.verified.join(', ')}]`,
  };
}

/** All entries whose id begins so. */
export function checkValues<Inputs, Expected>(beginning: string): CheckValue<Inputs, Expected>[] {
  const found = entries
    .filter((one) => one.id.startsWith(beginning))
    .map((one) => checkValue<Inputs, Expected>(one.id));
  if (found.length === 0) throw new Error(`checkValues.json has no entry that begins "${beginning}"`);
  return found;
}
