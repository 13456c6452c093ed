import { parseArgs } from 'node:util';
import type { ColumnMap, ColumnRole, DateOrder } from '../accounts/types.ts';
import { parseTenure } from '../census/parseTenure.ts';
import type { CensusView, Tenure } from '../census/types.ts';
import type { ChartKind, ShiftTest } from '../charts/types.ts';
import { type Day, dayFromIso } from '../days.ts';
import { EbbError } from '../errors.ts';

/** What the command line understood, each value checked. */
export interface CliOptions {
  readonly words: readonly string[];
  readonly json: boolean;
  readonly help: boolean;
  readonly version: boolean;
  readonly asOf?: Day;
  readonly tenure?: Tenure;
  readonly subgroupSize?: number;
  readonly baseline?: number;
  readonly segment?: { readonly column: string; readonly value: string };
  readonly columns?: ColumnMap;
  readonly dates?: DateOrder;
  /** auto: the kind that fits */
  readonly chart?: ChartKind | 'auto';
  readonly picture?: string;
  readonly points?: string;
  readonly counts?: string;
  readonly sizes?: string;
  /** ready values of a chart that is no count: gaps for g and t, ratios for individuals */
  readonly values?: string;
  readonly by?: CensusView;
  readonly tests?: readonly ShiftTest[];
}

/** Commands that read an export: the plain question, and one for each question around the verdict. */
export const FILE_COMMANDS = [
  'ask',
  'where',
  'plan',
  'early',
  'revenue',
  'reconcile',
  'worth',
  'target',
  'spread',
  'explain',
] as const;
export type FileCommand = (typeof FILE_COMMANDS)[number];
export type Command = FileCommand | 'chart';

const KNOWN = {
  'as-of': { type: 'string' },
  tenure: { type: 'string' },
  'subgroup-size': { type: 'string' },
  baseline: { type: 'string' },
  segment: { type: 'string' },
  by: { type: 'string' },
  chart: { type: 'string' },
  columns: { type: 'string' },
  dates: { type: 'string' },
  picture: { type: 'string' },
  points: { type: 'string' },
  counts: { type: 'string' },
  sizes: { type: 'string' },
  values: { type: 'string' },
  tests: { type: 'string' },
  json: { type: 'boolean' },
  help: { type: 'boolean', short: 'h' },
  version: { type: 'boolean' },
} as const;

/** Options that only one command has a use for. */
const ONLY = {
  file: ['as-of', 'tenure', 'subgroup-size', 'segment', 'by', 'columns', 'dates'],
  chart: ['counts', 'sizes', 'values'],
} as const;

/** Names of the options a command has a use for. */
export function optionsOf(command: Command): string[] {
  const others: readonly string[] = ONLY[command === 'chart' ? 'file' : 'chart'];
  return Object.keys(KNOWN).filter((name) => !others.includes(name));
}

const ROLES: readonly ColumnRole[] = ['id', 'start', 'end', 'segment', 'amount', 'currency'];
const CHARTS: readonly (ChartKind | 'auto')[] = ['auto', 'p', 'p-prime', 'g', 't', 'individuals', 'ewma', 'cusum'];
const VIEWS: readonly CensusView[] = ['start', 'renewal', 'calendar'];
const ORDERS: readonly DateOrder[] = ['iso', 'dmy', 'mdy'];

/**
 * Reads the words after the command.
 * @throws EbbError OPTION_UNKNOWN, OPTION_INVALID with the option and how to mend it
 */
export function readArguments(command: Command, args: readonly string[]): CliOptions {
  const { values, positionals } = parse(command, args);
  const lost = command === 'chart' ? undefined : ONLY.chart.find((name) => name in values);
  if (lost !== undefined) {
    throw new EbbError(
      'OPTION_UNKNOWN',
      `${command} has no option --${lost}`,
      'Ready counts are charted by: ebb chart --counts "12,15,8" --sizes 50',
    );
  }
  const by = values.by === undefined ? undefined : choice('--by', values.by, VIEWS);
  const chart = values.chart === undefined ? undefined : choice('--chart', values.chart, CHARTS);
  const segment = values.segment === undefined ? undefined : columnValue(values.segment);
  const columns = values.columns === undefined ? undefined : columnMap(values.columns);
  const named = segment ? { ...columns, segment: segment.column } : columns;
  return {
    words: positionals,
    json: values.json ?? false,
    help: values.help ?? false,
    version: values.version ?? false,
    ...(values['as-of'] === undefined ? {} : { asOf: isoDate('--as-of', values['as-of']) }),
    ...(values.tenure === undefined ? {} : { tenure: tenure(values.tenure) }),
    ...(values['subgroup-size'] === undefined
      ? {}
      : { subgroupSize: whole('--subgroup-size', values['subgroup-size'], 2) }),
    ...(values.baseline === undefined ? {} : { baseline: whole('--baseline', values.baseline, 2) }),
    ...(segment ? { segment } : {}),
    ...(named ? { columns: named } : {}),
    ...(values.dates === undefined ? {} : { dates: choice('--dates', values.dates, ORDERS) }),
    ...(chart ? { chart } : {}),
    ...(values.picture === undefined ? {} : { picture: values.picture }),
    ...(values.points === undefined ? {} : { points: values.points }),
    ...(values.counts === undefined ? {} : { counts: values.counts }),
    ...(values.sizes === undefined ? {} : { sizes: values.sizes }),
    ...(values.values === undefined ? {} : { values: values.values }),
    ...(by ? { by } : {}),
    ...(values.tests === undefined ? {} : { tests: shiftTests(values.tests) }),
  };
}

function parse(command: Command, args: readonly string[]) {
  try {
    return parseArgs({
      args: [...args],
      options: KNOWN,
      allowPositionals: true,
      strict: true,
    });
  } catch (error) {
    const text = error instanceof Error ? error.message : String(error);
    const unknown = /Unknown option '([^']+)'/.exec(text)?.[1];
    if (unknown !== undefined) {
      throw new EbbError(
        'OPTION_UNKNOWN',
        `there is no option ${unknown}`,
        `The options of ${command} are ${optionsOf(command)
          .map((name) => `--${name}`)
          .join(', ')}.`,
      );
    }
    const option = /Option '([^' ]+)/.exec(text)?.[1] ?? 'an option';
    throw new EbbError(
      'OPTION_INVALID',
      `${option} needs a value`,
      'Put it right after the option, for example --tenure "3 months".',
      { cause: error },
    );
  }
}

function isoDate(option: string, text: string): Day {
  const day = dayFromIso(text);
  if (day === undefined)
    throw new EbbError(
      'OPTION_INVALID',
      `${option}: "${text}" is not a date`,
      'Write it as YYYY-MM-DD, for example 2025-06-30.',
    );
  return day;
}

function tenure(text: string): Tenure {
  const parsed = parseTenure(text);
  if (!parsed)
    throw new EbbError(
      'OPTION_INVALID',
      `--tenure: "${text}" is not an age`,
      'Write a whole number of days, weeks or months, for example --tenure "3 months".',
    );
  return parsed;
}

function whole(option: string, text: string, least: number): number {
  const value = Number(text);
  if (!/^\d+$/.test(text) || value < least || value > 10_000_000) {
    throw new EbbError(
      'OPTION_INVALID',
      `${option}: "${text}" is not a whole number of at least ${least}`,
      `For example ${option} ${least === 2 ? 30 : least}.`,
    );
  }
  return value;
}

function choice<T extends string>(option: string, text: string, allowed: readonly T[]): T {
  const found = allowed.find((value) => value === text);
  if (found === undefined)
    throw new EbbError(
      'OPTION_INVALID',
      `${option}: "${text}" is not one of ${allowed.join(', ')}`,
      `For example ${option} ${allowed[0]}.`,
    );
  return found;
}

const SHIFT_TESTS: readonly ShiftTest[] = [1, 2, 3, 5, 6];

/** "1,2,5,6": the tests that decide, by their numbers in Nelson (1984). */
function shiftTests(text: string): ShiftTest[] {
  const wanted = text.split(',').map((part) => part.trim());
  const unknown = wanted.find((part) => !SHIFT_TESTS.some((test) => String(test) === part));
  if (unknown !== undefined) {
    throw new EbbError(
      'OPTION_INVALID',
      `--tests: "${unknown}" is not a test that can raise a shift`,
      `Those are ${SHIFT_TESTS.join(', ')} (Nelson 1984); for example --tests 1,2,5,6.`,
    );
  }
  return SHIFT_TESTS.filter((test) => wanted.includes(String(test)));
}

function columnValue(text: string): { column: string; value: string } {
  const at = text.indexOf('=');
  if (at < 1 || at === text.length - 1) {
    throw new EbbError(
      'OPTION_INVALID',
      `--segment: "${text}" does not name a column and a value`,
      'Write COLUMN=VALUE, for example --segment plan=annual.',
    );
  }
  return { column: text.slice(0, at), value: text.slice(at + 1) };
}

function columnMap(text: string): ColumnMap {
  const map: ColumnMap = {};
  for (const part of text.split(',')) {
    const [role, ...rest] = part.split('=');
    const column = rest.join('=').trim();
    const known = ROLES.find((name) => name === role?.trim());
    if (!known || column === '') {
      throw new EbbError(
        'OPTION_INVALID',
        `--columns: "${part}" is not ROLE=COLUMN`,
        `The roles are ${ROLES.join(', ')}; for example --columns start=joined,end=left.`,
      );
    }
    map[known] = column;
  }
  return map;
}
