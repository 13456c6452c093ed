import { describe, expect, test } from 'vitest';
import { pChart } from '../../src/charts/kinds/pChart.ts';
import { judge } from '../../src/verdict/judgement.ts';
import type { Signal } from '../../src/verdict/types.ts';
import { calm, points } from './counts.ts';

const signalsOf = (lost: readonly number[], accounts = 100): readonly Signal[] =>
  judge(pChart(points(accounts, lost))).signals;
const ofTest = (signals: readonly Signal[], test: number): Signal[] => signals.filter((signal) => signal.test === test);

describe('a flag', () => {
  test('stands when the last stretch does: its points and side are told, in words', () => {
    const signals = signalsOf([...calm(32), ...calm(12, [13, 15, 12, 14])]);
    const [run] = ofTest(signals, 2);
    expect(run).toMatchObject({ state: 'standing', side: 'above', members: [33, 41], point: 41, until: 44 });
    expect(run!.words).toMatch(/12|twelve/);
    expect(run!.words).toContain('above the usual level');
  });

  test('is watched when it is new and the stretch does not stand yet', () => {
    // One point beyond three sigma, the newest: upper limit 0.1294 at a level of 0.0588
    const lost = [...calm(39), 13];
    const judgement = judge(pChart(points(100, lost)));
    expect(judgement.finding).toBe('steady');
    expect(ofTest(judgement.signals, 1)).toMatchObject([{ point: 40, state: 'watching', side: 'above' }]);
  });

  test('has passed when the points since then no longer bear it out', () => {
    const signals = signalsOf([...calm(30), 14, ...calm(25)]);
    expect(ofTest(signals, 1)).toMatchObject([{ point: 31, state: 'passed' }]);
  });

  test('inside the baseline has passed: it was used to set the level', () => {
    const signals = signalsOf([...calm(10), 15, ...calm(29)]);
    expect(ofTest(signals, 1)).toMatchObject([{ point: 11, state: 'passed' }]);
  });

  test('on the side of a standing move, but over before it began, has passed', () => {
    const signals = signalsOf([...calm(26), 15, ...calm(12), ...calm(12, [13, 15, 12, 14])]);
    const ones = ofTest(signals, 1).filter(({ side }) => side === 'above');
    expect(ones[0]).toMatchObject({ point: 27, state: 'passed' });
    expect(ones.slice(1).some(({ state }) => state === 'standing')).toBe(true);
  });

  test('on the other side of a standing move has passed', () => {
    const signals = signalsOf([...calm(25, [14, 12, 16, 13, 15]), 30, ...calm(14, [5, 4, 6])]);
    const [up] = ofTest(signals, 1).filter(({ side }) => side === 'above');
    expect(up).toMatchObject({ point: 26, state: 'passed' });
    expect(signals.some(({ side, state }) => side === 'below' && state === 'standing')).toBe(true);
  });

  test('about how the data was cut never stands: watched while new, passed later', () => {
    const turns = calm(16, [4, 8]);
    const steady = [6, 6, 7, 5, 5, 6, 7, 7, 6, 5];
    const fresh = ofTest(signalsOf([...calm(30, steady), ...turns]), 4);
    expect(fresh.length).toBeGreaterThan(0);
    expect(fresh.every(({ state, speaks }) => state === 'watching' && speaks === 'cut')).toBe(true);
    const old = ofTest(signalsOf([...calm(30, steady), ...turns, ...calm(20, steady)]), 4);
    expect(old.some(({ state }) => state === 'passed')).toBe(true);
    expect(old.every(({ state }) => state !== 'standing')).toBe(true);
  });

  test('is told on charts of too few points as well, never as standing', () => {
    const judgement = judge(pChart(points(100, [...calm(9), 30])));
    expect(judgement.finding).toBe('too-few-points');
    expect(ofTest(judgement.signals, 1)).toMatchObject([{ point: 10, state: 'watching' }]);
  });
});
