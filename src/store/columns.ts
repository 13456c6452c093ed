import { z } from 'zod';
import type { ReadReport } from '../accounts/types.ts';
import type { WeeklyTime } from '../requests/types.ts';
import type { ChannelSettings, ReadChoices, Seen } from './types.ts';

/* What the JSON columns hold. Checked on reading, since an older version, or a person with a database tool, may have written them. */

const columnMap = z.object({
  id: z.string().exactOptional(),
  start: z.string().exactOptional(),
  end: z.string().exactOptional(),
  segment: z.string().exactOptional(),
  amount: z.string().exactOptional(),
  currency: z.string().exactOptional(),
});
const dateOrder = z.enum(['iso', 'dmy', 'mdy']);
const count = z.number().int().nonnegative();
const day = z.number().int();

export const choicesSchema: z.ZodType<ReadChoices> = z.object({
  columns: columnMap.exactOptional(),
  dates: dateOrder.exactOptional(),
  asOf: day.exactOptional(),
});

export const settingsSchema: z.ZodType<ChannelSettings> = z.object({
  tenure: z.string().exactOptional(),
  subgroupSize: z.number().int().positive().exactOptional(),
  segment: z.string().exactOptional(),
  settleDays: count.exactOptional(),
});

export const timeSchema: z.ZodType<WeeklyTime> = z.object({
  weekday: z.number().int().min(1).max(7),
  hour: z.number().int().min(0).max(23),
  minute: z.number().int().min(0).max(59),
  zone: z.string(),
});

export const timesSchema = z.array(z.number());

export const seenSchema: z.ZodType<Seen> = z.object({
  at: z.number(),
  asOf: day,
  outcome: z.string(),
  tenure: z.string(),
  subgroupSize: count,
  points: z.array(z.object({ start: day, accounts: count, lost: count })),
  flags: z.array(z.object({ key: z.string(), words: z.string(), state: z.string() })),
});

export const headersSchema = z.array(z.string());

export const reportSchema: z.ZodType<ReadReport> = z.object({
  rows: count,
  accounts: count,
  returned: count,
  mergedRows: count,
  asOf: day,
  inferredAsOf: day,
  asOfSource: z.string(),
  futureEnds: count,
  firstStart: day,
  lastStart: day,
  columns: columnMap,
  headers: headersSchema,
  dates: dateOrder,
  datesSource: z.enum(['given', 'iso', 'values']),
  encoding: z.string(),
  delimiter: z.string(),
  rejected: z.array(
    z.object({
      code: z.string(),
      reason: z.string(),
      rows: count,
      firstLine: count,
      examples: z.array(z.object({ line: count, value: z.string() })),
    }),
  ),
  segments: z.array(z.object({ value: z.string(), accounts: count })),
  amounts: z
    .object({
      missing: count,
      unreadable: count,
      firstUnreadable: z.object({ line: count, value: z.string() }).nullable(),
      negative: count,
      zero: count,
      decimalComma: z.boolean(),
      thousands: count,
      severalAtOnce: count,
      currencies: z.array(z.object({ currency: z.string().nullable(), accounts: count })),
    })
    .exactOptional(),
});

/**
 * The value of a JSON column.
 * @param where what is being read, for the message: 'the report of dataset …'
 * @throws Error naming the place and what is wrong with it
 */
export function readColumn<T>(schema: z.ZodType<T>, value: unknown, where: string): T {
  const result = schema.safeParse(value);
  if (result.success) return result.data;
  throw new Error(`${where} is stored in a form this version cannot read: ${z.prettifyError(result.error)}`);
}
