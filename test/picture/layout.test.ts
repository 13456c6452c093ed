import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { layout } from '../../src/picture/layout.ts';
import { boxOf, overlap, type Scene } from '../../src/picture/scene.ts';
import { flag, makeInput } from './inputs.ts';
import { makings, state } from './states.ts';

/** Pairs of texts that touch, and texts that leave the drawing, in words. */
function faults(scene: Scene): string[] {
  const placed = scene.texts.map((text) => ({ text, box: boxOf(text) }));
  const found: string[] = [];
  for (const [i, one] of placed.entries()) {
    const { left, right, top, bottom } = one.box;
    if (left < 0 || top < 0 || right > scene.widthPx || bottom > scene.heightPx) found.push(`cut: ${one.text.text}`);
    for (const other of placed.slice(i + 1))
      if (overlap(one.box, other.box)) found.push(`touch: "${one.text.text}" and "${other.text.text}"`);
  }
  return found;
}

describe('layout', () => {
  test.each(Object.keys(makings))('%s: no two texts touch and none leaves the drawing', (name) => {
    expect(faults(layout(state(name)))).toEqual([]);
  });

  test('no two texts touch, whatever the numbers, the flags and the words', () => {
    const making = fc
      .record({
        points: fc.oneof(fc.integer({ min: 1, max: 60 }), fc.integer({ min: 61, max: 400 })),
        rate: fc.oneof(fc.constantFrom(0, 1, 0.003, 0.06, 0.6), fc.double({ min: 0, max: 1, noNaN: true })),
        after: fc.double({ min: 0, max: 1, noNaN: true }),
        size: fc.integer({ min: 1, max: 150 }),
        unequal: fc.boolean(),
        baseline: fc.integer({ min: 1, max: 40 }),
        seed: fc.integer(),
        moves: fc.boolean(),
        at: fc.double({ min: 0, max: 1, noNaN: true }),
        flags: fc.array(
          fc.tuple(
            fc.double({ min: 0, max: 1, noNaN: true }),
            fc.integer({ min: 0, max: 20 }),
            fc.integer({ min: 0, max: 2 }),
          ),
          {
            maxLength: 8,
          },
        ),
        headline: fc.string({ unit: 'grapheme', minLength: 1, maxLength: 300 }),
        subject: fc.string({ unit: 'grapheme', maxLength: 200 }),
        daysPerPoint: fc.integer({ min: 1, max: 90 }),
        dated: fc.boolean(),
        waits: fc.boolean(),
      })
      .map((one) => {
        const place = (share: number): number => 1 + Math.min(one.points - 1, Math.floor(share * one.points));
        const from = place(one.at);
        const states = ['standing', 'watching', 'passed'] as const;
        return makeInput({
          points: one.points,
          rate: one.rate,
          size: one.unequal ? (i: number) => one.size + (i % 7) : one.size,
          baseline: one.baseline,
          seed: one.seed,
          ...(one.moves && from > 1
            ? {
                moved: {
                  from,
                  rate: one.after,
                  candidates: [Math.max(2, from - 3), Math.min(one.points, from + 2)] as const,
                },
              }
            : {}),
          outcome: one.moves && from > 1 ? (one.after > one.rate ? 'risen' : 'fallen') : 'steady',
          headline: one.headline,
          subject: one.subject,
          daysPerPoint: one.daysPerPoint,
          dated: one.dated,
          signals: one.flags.map(([share, length, which]) => {
            const first = place(share);
            const members = [first, Math.min(one.points, first + length)] as const;
            return flag(2, members, 'above', states[which] ?? 'passed', 'nine points in a row above the usual level');
          }),
          ...(one.waits ? {} : { waiting: null }),
        });
      });
    fc.assert(
      fc.property(making, (input) => {
        expect(faults(layout(input))).toEqual([]);
      }),
      { numRuns: 150 },
    );
  });

  test('the labels of the limits stand at the right of the plot, in the order of their values', () => {
    const scene = layout(state('fallen'));
    const labels = scene.texts.filter((text) => ['limit', 'center', 'after'].includes(text.role));
    expect(labels.map((label) => label.text)).toEqual([
      'chance alone',
      'stays below',
      expect.stringMatching(/^\d+\.\d\u00a0%$/),
      'usual level',
      expect.stringMatching(/^\d+\.\d\u00a0%$/),
      'since then',
      expect.stringMatching(/^about \d+\.\d\u00a0%$/),
      'and above',
      expect.stringMatching(/^\d+\.\d\u00a0%$/),
    ]);
    for (const label of labels) expect(label.x).toBeGreaterThan(scene.frame.right);
  });

  test('a lower limit of zero gets no label, because nothing can fall below it', () => {
    const input = state('steady');
    expect(input.chart?.points.at(-1)?.lower).toBe(0);
    expect(layout(input).texts.map((text) => text.text)).not.toContain('and above');
  });

  test('the waiting group is an empty mark after the last point, and its words say how full it is and when it is due', () => {
    const scene = layout(state('steady'));
    const words = scene.texts.filter((text) => text.role === 'note').map((text) => text.text.replaceAll('\u00a0', ' '));
    expect(words).toContain('next point: 37 of 85 accounts so far, due about 3 December 2025');
    expect(words).toContain('412 accounts are too young to be counted');
    const lastPoint = scene.points.at(-1);
    expect(scene.frame.xDomain[1]).toBeGreaterThan((lastPoint?.x ?? 0) + 1);
  });

  test('flagged points differ in shape from the others, and those the usual level was set from are hollow', () => {
    const scene = layout(state('risen'));
    expect(scene.points[43]?.shape).toBe('diamond');
    expect(scene.points[20]?.shape).toBe('circle');
    expect(scene.points[20]?.fill).not.toBe(scene.points[30]?.fill);
  });

  test('limits that change from point to point are drawn as steps, equal ones as one stretch', () => {
    expect(layout(state('unequal')).band.length).toBe(2 * 36);
    expect(layout(state('steady')).band.length).toBe(2);
  });

  test('a scale that does not start at zero says so', () => {
    const notes = (name: string) =>
      layout(state(name))
        .texts.filter((text) => text.role === 'note')
        .map((text) => text.text);
    expect(notes('frequent').join('\n')).toMatch(/the scale starts at \d+\u00a0%, not at zero/);
    expect(notes('steady').join('\n')).not.toMatch(/scale starts/);
  });

  test('a provisional usual level is told on the picture even when no caution says so', () => {
    const notes = layout(state('eight')).texts.map((text) => text.text.replaceAll('\u00a0', ' '));
    expect(notes).toContain('provisional usual level: only 8 points');
  });

  test('ready counts have point numbers below, not dates', () => {
    const labels = layout(state('counts'))
      .texts.filter((text) => text.role === 'date')
      .map((text) => text.text);
    expect(labels[0]).toBe('point\u00a01');
    expect(labels.slice(1).every((label) => /^\d+$/.test(label))).toBe(true);
  });

  test('no letters of a trade that the reader would have to know', () => {
    for (const name of Object.keys(makings))
      for (const text of layout(state(name)).texts) expect(text.text).not.toMatch(/\b(UCL|LCL|CL|sigma)\b|σ/);
  });
});
