import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { z } from 'zod';
import { runEbb } from './runEbb.ts';

const fraction = z.number().min(0).max(1);
const day = z.string().regex(/^\d{4}-\d{2}-\d{2}$/);
const pooled = z.object({ rate: fraction, low: fraction, high: fraction, lost: z.number(), accounts: z.number() });
const figures = z.object({
  column: z.string(),
  tenure: z.string(),
  lookedAt: z.number().int(),
  judged: z.number().int(),
  moved: z.array(z.string()),
  procedure: z.object({ name: z.literal('benjamini-hochberg'), falsePart: z.literal(0.05) }),
  groups: z.array(
    z.object({
      group: z.string(),
      finding: z.enum(['risen', 'fallen', 'alone', 'steady', 'unsteady', 'no-level', 'too-few']),
      chance: fraction.nullable(),
      adjustedChance: fraction.nullable(),
      matured: z.number().int(),
      subgroupSize: z.number().int(),
      since: z.object({ point: z.number().int(), start: day }).nullable(),
      before: pooled.nullable(),
      after: pooled.nullable(),
      points: z.array(z.object({ index: z.number(), accounts: z.number(), lost: z.number(), firstStart: day })),
    }),
  ),
  overall: z.object({ outcome: z.string(), headline: z.string() }),
  change: z
    .object({
      basis: z.enum(['move', 'level', 'halves']),
      difference: z.number(),
      ratePart: z.number(),
      mixPart: z.number(),
      groups: z.array(z.object({ group: z.string(), ratePart: z.number(), mixPart: z.number() })),
    })
    .nullable(),
});
const output = z.object({
  question: z.literal('where'),
  answer: z.object({
    headline: z.string().min(1),
    evidence: z.array(z.string()),
    cautions: z.array(z.string()),
    next: z.array(z.string()),
  }),
  where: figures,
});

const FALLEN = 'fixtures/exports/marrowby-recipe-cards.csv';
const MIX = 'fixtures/exports/marrowby-mix-drift.csv';

describe('ebb where', () => {
  let folder: string;
  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'ebb-where-'));
  });
  afterAll(() => rm(folder, { recursive: true, force: true }));

  it('answers the same in words and as JSON, with a picture, whichever way it is asked', async () => {
    const picture = join(folder, 'where.png');
    const asked = await runEbb('where', FALLEN, '--json', '--picture', picture);
    expect(asked.code).toBe(0);
    const { answer, where } = output.parse(JSON.parse(asked.stdout));
    expect(where.column).toBe('plan');
    expect(where.moved.length).toBeGreaterThan(0);
    expect(where.groups.filter(({ finding }) => finding === 'fallen').map(({ group }) => group)).toEqual(where.moved);
    expect(where.change!.ratePart + where.change!.mixPart).toBeCloseTo(where.change!.difference, 12);
    for (const { points, subgroupSize } of where.groups)
      expect(points.every(({ accounts }) => accounts === subgroupSize)).toBe(true);
    const png = await readFile(picture);
    expect(png.subarray(1, 4).toString()).toBe('PNG');
    expect(png.readUInt32BE(16)).toBe(1_080);

    const inWords = await runEbb('ask', FALLEN, 'which', 'plans', 'moved?');
    expect(inWords.code).toBe(0);
    expect(inWords.stdout).toContain(answer.headline);
    for (const line of [...answer.evidence, ...answer.cautions]) expect(inWords.stdout).toContain(line);
  });

  it('tells a moving mix from a move of the groups', async () => {
    const { stdout, code } = await runEbb('where', MIX, '--json');
    expect(code).toBe(0);
    const { where } = output.parse(JSON.parse(stdout));
    expect(where.moved).toEqual([]);
    expect(where.change!.basis).toBe('move');
    expect(Math.abs(where.change!.mixPart)).toBeGreaterThan(4 * Math.abs(where.change!.ratePart));
  });

  it('looks at the column that is named, and says how to name one when there is none', async () => {
    const named = await runEbb('where', FALLEN, '--columns', 'segment=household', '--json');
    expect(named.code).toBe(0);
    const { where, answer } = output.parse(JSON.parse(named.stdout));
    expect(where.column).toBe('household');
    expect(answer.cautions.join(' ')).toMatch(/“household” has [\d,]+ values: the twelve with most accounts/);

    const bare = join(folder, 'bare.csv');
    const rows = Array.from({ length: 40 }, (_, i) => `a${i},2024-01-${String((i % 28) + 1).padStart(2, '0')},`);
    await writeFile(bare, `id,start,end\n${rows.join('\n')}\nb,2024-01-05,2024-03-01\n`);
    const none = await runEbb('where', bare, '--json');
    expect(none.code).toBe(2);
    expect(JSON.parse(none.stdout)).toMatchObject({ error: { code: 'SEGMENT_UNKNOWN' } });
    expect(none.stderr + none.stdout).toContain('--columns segment=COLUMN');
  });
});
