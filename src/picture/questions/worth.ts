import { geometricSurvival } from '../../charts/lifetimes/geometricLifetime.ts';
import { type Day, dayInWords } from '../../days.ts';
import { money, monthsFigure, monthsWords } from '../../verdict/questions/worth.ts';
import type { Era, WorthFindings } from '../../verdict/questions/worthFindings.ts';
import { listed } from '../../verdict/words/format.ts';
import { INK, LEVEL, QUIET, WATER_DEEP, WATER_EDGE } from '../palette.ts';
import { type Ink, ink, placed } from '../panel/ink.ts';
import { panel } from '../panel/panel.ts';
import { type KeySign, type Part, type PlateNote, plate, stack, words } from '../panel/plate.ts';
import { band, DOT, dots, line, lyingRanges, RING, steps, upright } from '../panel/shapes.ts';
import type { Scene } from '../scene.ts';

/** The picture of a lifetime: the share still there as measured and as a constant rate would have it, and the lifetimes with their intervals. */
export function worthScene(findings: WorthFindings, subject: string, asOf: Day): Scene {
  const { now, since } = findings;
  const rows = estimates(findings);
  const total = now.measured?.total;
  return plate(
    {
      title: !now.measured
        ? 'Too few accounts to measure a lifetime'
        : total
          ? `About ${monthsWords(total.estimate)}${now.measured.tail ? ', part of it assumed' : ''}`
          : `${monthsFigure(now.measured.restricted.estimate)} of the first ${monthsWords(now.measured.horizon)}`,
      counted: [
        'How long an account stays',
        subject,
        `data to ${dayInWords(asOf)}`,
        since === null ? '' : `split at ${dayInWords(since)}`,
      ],
      keys: keys(findings),
    },
    [...(now.measured || now.constant ? [curvePart(findings)] : []), ...(rows.length > 0 ? [estimatesPart(rows)] : [])],
    notes(findings),
  );
}

const MEASURED: KeySign = { line: LEVEL };
const CONSTANT = { line: INK, width: 2.4, dash: [8, 6] } as const;
const EARLIER: KeySign = { line: WATER_EDGE, width: 3 };

function keys({ now, before, since }: WorthFindings): { words: string; sign: KeySign }[] {
  return [
    ...(now.measured
      ? [{ words: since === null ? 'measured' : `measured, started since ${dayInWords(since)}`, sign: MEASURED }]
      : []),
    ...(now.constant ? [{ words: 'at a constant rate', sign: CONSTANT }] : []),
    ...(before?.measured ? [{ words: 'measured, started before', sign: EARLIER }] : []),
    ...(before?.constant ? [{ words: 'at a constant rate, before', sign: { ...CONSTANT, line: WATER_EDGE } }] : []),
  ];
}

function curvePart(findings: WorthFindings): Part {
  const { now, before, tenureMonths } = findings;
  const horizon = now.measured?.horizon ?? 0;
  const last = Math.max(12, horizon, before?.measured?.horizon ?? 0, Math.ceil(2 * tenureMonths)) * 1.25;
  return (top) => {
    const plot = panel({
      top,
      height: 300,
      x: { domain: [0, last], figures: 'count', title: 'months since the start' },
      y: { domain: [0, 1], figures: 'percent', title: 'still there' },
    });
    const constant = (era: Era | null, color: string): Ink => {
      const hazard = era?.constant?.hazard.estimate;
      if (hazard === undefined) return {};
      const places = Array.from({ length: 61 }, (_, i) => ({
        x: (last * i) / 60,
        y: geometricSurvival(hazard, (last * i) / 60),
      }));
      return line(plot, places, { color, width: 2.4, dash: [8, 6] });
    };
    return {
      ink: ink(
        now.months.length > 0
          ? band(
              plot,
              [
                { x: 0, low: 1, high: 1 },
                ...now.months.map(({ month, survival, low, high }) => ({
                  x: month,
                  low: low ?? survival,
                  high: high ?? survival,
                })),
              ],
              { color: WATER_DEEP, end: horizon, opacity: 0.8 },
            )
          : {},
        before ? curve(plot, before, last, WATER_EDGE, 3) : {},
        constant(before, WATER_EDGE),
        constant(now, INK),
        curve(plot, now, last, LEVEL, 4),
        horizon > 0 ? upright(plot, horizon, { color: QUIET, width: 1.6 }) : {},
        plot.axes,
      ),
      bottom: plot.bottom,
    };
  };
}

/** Steps as far as measured, dotted as assumed. */
function curve(plot: Parameters<typeof steps>[0], { measured }: Era, last: number, color: string, width: number): Ink {
  if (!measured) return {};
  const { horizon, reached, tail } = measured;
  const kept = reached.slice(0, horizon).map((y, x) => ({ x, y }));
  const end = reached.length - 1;
  const assumed = [
    ...reached.slice(horizon).map((y, i) => ({ x: horizon + i, y })),
    ...(tail === null
      ? []
      : Array.from({ length: 30 }, (_, i) => {
          const more = ((last - end) * (i + 1)) / 30;
          return { x: end + more, y: (reached[end] ?? 0) * (1 - tail.hazard) ** more };
        })),
  ];
  const beyond = line(plot, assumed, { color, width, dash: [2, 6] });
  return ink(steps(plot, kept, horizon, { color, width }), beyond);
}

interface Estimate {
  readonly words: string;
  readonly value: number;
  readonly low: number;
  readonly high: number;
  readonly measured: boolean;
}

/** The lifetimes that have both limits, each with its assumption in its words. */
function estimates({ now, before, since, amount }: WorthFindings): Estimate[] {
  const currency = amount.kind === 'amounts' ? amount.currency : null;
  const rows = (era: Era, when: string): Estimate[] => {
    const { measured, constant, values } = era;
    const worth = (value: number | undefined): string =>
      value === undefined ? '' : `, worth ${money(value, currency)}`;
    const list: Estimate[] = [];
    if (measured?.total)
      list.push({
        words: `${when}measured${measured.borrowed ? ', then as before' : measured.tail ? `, then as months ${measured.tail.from} to ${measured.tail.to}` : ''}: ${monthsWords(measured.total.estimate)}${worth(values?.measured?.estimate)}`,
        value: measured.total.estimate,
        low: measured.total.low,
        high: measured.total.high,
        measured: true,
      });
    const mean = constant?.mean;
    if (mean && mean.estimate !== null && mean.high !== null)
      list.push({
        words: `${when}at a constant rate: ${monthsWords(mean.estimate)}${worth(values?.constant?.estimate)}`,
        value: mean.estimate,
        low: mean.low,
        high: mean.high,
        measured: false,
      });
    return list;
  };
  return [...rows(now, since === null ? '' : 'now, '), ...(before ? rows(before, 'before, ') : [])];
}

function estimatesPart(rows: readonly Estimate[]): Part {
  // An interval many times as long as the longest lifetime says no more than that: it runs out of the panel.
  const most = Math.min(Math.max(...rows.map(({ high }) => high)), 3 * Math.max(...rows.map(({ value }) => value)));
  return stack([
    words('How long an account stays, with 95 % intervals', { bold: true }),
    (top) => {
      const plot = panel({
        top,
        height: rows.length * 60,
        x: { domain: [0, most], nice: true, figures: 'number', title: 'months' },
        y: { domain: [0, rows.length], ticks: [] },
      });
      const end = plot.frame.xDomain[1];
      const at = (i: number): number => rows.length - i - 0.75;
      return {
        ink: ink(
          lyingRanges(
            plot,
            rows.map(({ low, high, measured }, i) => ({
              y: at(i),
              low,
              high: Math.min(high, end),
              color: measured ? LEVEL : QUIET,
            })),
          ),
          dots(
            plot,
            rows.map(({ value, measured }, i) => ({ x: value, y: at(i), look: measured ? DOT : RING })),
          ),
          {
            texts: rows.map((row, i) =>
              placed(row.words, plot.frame.left, plot.y(at(i)) - 14, { color: INK, role: 'row' }),
            ),
          },
          plot.axes,
        ),
        bottom: plot.bottom,
      };
    },
  ]);
}

function notes({ now, before, amount }: WorthFindings): PlateNote[] {
  const list: PlateNote[] = [];
  if (now.measured) {
    list.push({
      words: `measured as far as month ${now.measured.horizon}, the upright line${before?.measured ? ` (before: month ${before.measured.horizon})` : ''}; dotted: assumed, ${now.measured.borrowed ? 'as for accounts from before and then ' : ''}as in the last months measured`,
      sign: { line: LEVEL, width: 4, dash: [2, 6] },
    });
    list.push({ words: 'where chance leaves the measured share, 95 times in 100', sign: { area: WATER_DEEP } });
  }
  if (now.constant)
    list.push({ words: 'constant rate: the early pace of leaving, at every age and for ever', sign: CONSTANT });
  if (amount.kind === 'amounts')
    list.push({
      words: amount.periodStated
        ? 'values are income before any cost, nothing discounted'
        : `values take “${amount.column}” for an amount per month`,
      sign: 'heed',
    });
  return list;
}

/** The picture in words. */
export function worthAltText(findings: WorthFindings): string {
  const { now } = findings;
  const rows = estimates(findings);
  const curveWords =
    now.measured === null
      ? 'Too few accounts were watched to measure how long they stay.'
      : `The share of accounts still there, measured over ${monthsWords(now.measured.horizon)}: ${listed(
          [now.months.find(({ month }) => month === Math.min(12, now.measured!.horizon)), now.months.at(-1)]
            .flatMap((month) =>
              month ? [`${Math.round(month.survival * 100)} % after ${monthsWords(month.month)}`] : [],
            )
            .filter((text, i, all) => all.indexOf(text) === i),
        )}; beside it the curve of a constant rate.`;
  const stays =
    rows.length === 0
      ? ''
      : ` How long an account stays: ${rows.map((row) => `${row.words} (${monthsFigure(row.low)} to ${monthsFigure(row.high)})`).join('; ')}.`;
  return `${curveWords}${stays}`;
}
