import { type Day, dayInWords } from '../../days.ts';
import type { PlanFindings, SizeReason, TenureMonth } from '../../verdict/questions/planFindings.ts';
import { moveNoun, weeksInWords } from '../../verdict/questions/waits.ts';
import { count, counted, listed, percent } from '../../verdict/words/format.ts';
import { EMBER, INK, LEVEL, QUIET, SAND, WATER_EDGE } from '../palette.ts';
import { type Ink, ink } from '../panel/ink.ts';
import { callouts } from '../panel/labels.ts';
import { panel } from '../panel/panel.ts';
import { type Part, type PlateNote, plate, words } from '../panel/plate.ts';
import { DOT, dots, ground, level, line, RING, ranges, STANDOUT, upright } from '../panel/shapes.ts';
import { wordedTicks } from '../panel/ticks.ts';
import type { Scene } from '../scene.ts';

/** Delays this many times the one of the size in use are cut off the curve, or its end would flatten all that matters. */
const TALLEST = 3;

/** The plan's picture: hazard by month of tenure with the tenure point, and delay against subgroup size with the sizes on offer. */
export function planScene(findings: PlanFindings, subject: string, asOf: Day): Scene {
  const { tenure, offers, months } = findings;
  const chosen = offers.find((offer) => offer.chosen);
  return plate(
    {
      title: `Count at ${tenure}, ${count(chosen?.subgroupSize ?? findings.subgroupSize)} accounts a point`,
      counted: ['How to count churn', subject, `data to ${dayInWords(asOf)}`],
    },
    [
      ...(months.length > 0
        ? [hazardPart(findings)]
        : [words('No month of tenure is observed on enough accounts to measure.', { color: QUIET })]),
      delayPart(findings),
    ],
    notes(findings),
  );
}

function hazardPart({ months, tenure, tenureMonths, usualHazard }: PlanFindings): Part {
  return (top) => {
    const last = Math.max(months.at(-1)!.month, tenureMonths);
    // A wide interval of a month with few accounts must not flatten all others: it runs out at the top.
    const highest = Math.min(
      Math.max(...months.map(({ hazard }) => hazard.high)),
      1.6 * Math.max(...months.map(({ hazard }) => hazard.estimate)),
    );
    const plot = panel({
      top,
      height: 230,
      x: {
        domain: [0, last + 1],
        figures: 'count',
        ticks: monthTicks(last),
        title: 'month since the start',
      },
      y: {
        domain: [0, Math.max(highest, 0.01)],
        nice: true,
        figures: 'percent',
        title: 'of those still there, leave in the month',
      },
    });
    const ceiling = plot.frame.yDomain[1];
    const intervals = months.map(({ month, hazard }) => ({ x: month, low: hazard.low, high: hazard.high }));
    const drawn = ink(
      ranges(
        plot,
        intervals.filter(({ high }) => high <= ceiling),
        { color: WATER_EDGE, foot: months.length > 30 ? 3 : 5 },
      ),
      ranges(
        plot,
        intervals.filter(({ high }) => high > ceiling).map((one) => ({ ...one, high: ceiling })),
        { color: WATER_EDGE, foot: 0 },
      ),
      dots(
        plot,
        months.map((one) => ({ x: one.month, y: one.hazard.estimate, look: one.risky ? STANDOUT : DOT })),
      ),
    );
    // After the tenure point's own month: what is lost in that month is counted.
    const at = tenureMonths + 0.5;
    const mark = upright(plot, at, { color: LEVEL, width: 3 });
    return {
      ink: ink(
        ground(plot, 0, at, SAND),
        usualHazard === null ? {} : level(plot, usualHazard, { width: 1.8, dash: [7, 6] }),
        drawn,
        mark,
        plot.axes,
        callouts(
          plot,
          [
            {
              x: at,
              y: ceiling * 0.9,
              words: `read here: ${tenure}`,
              color: LEVEL,
              bold: true,
              sides: ['right', 'left'],
            },
            ...riskiest(months).map(({ month, hazard }) => ({
              x: month,
              y: hazard.estimate,
              words: percent(hazard.estimate),
              color: EMBER,
              bold: true,
              sides: ['above', 'right', 'left'] as const,
            })),
          ],
          [drawn, mark],
        ),
      ),
      bottom: plot.bottom,
    };
  };
}

/** The risky months worth a figure of their own. */
function riskiest(months: readonly TenureMonth[]): TenureMonth[] {
  return months
    .filter(({ risky }) => risky)
    .sort((a, b) => b.hazard.estimate - a.hazard.estimate)
    .slice(0, 4);
}

function monthTicks(last: number) {
  const step = last <= 12 ? 1 : last <= 24 ? 3 : 6;
  const values = Array.from({ length: Math.floor(last / step) }, (_, i) => (i + 1) * step);
  return wordedTicks(step === 1 ? values : [1, ...values.filter((value) => value > 1)], 'count');
}

function delayPart(findings: PlanFindings): Part {
  const { curve, offers, inflowPerWeek, movedRate, move, assumedRate } = findings;
  const marked = offers.flatMap((offer) => {
    const place = curve.find(({ subgroupSize }) => subgroupSize === offer.subgroupSize);
    return place ? [{ ...place, offer }] : [];
  });
  if (movedRate === null || curve.length < 2 || marked.length === 0)
    return words('No delay can be drawn: there is no move to be seen.', { color: QUIET });
  return (top) => {
    const inUse = marked.find(({ offer }) => offer.chosen) ?? marked[0]!;
    const ceiling = Math.max(TALLEST * inUse.delay, 1.15 * Math.max(...marked.map(({ delay }) => delay)));
    const shown = curve.filter(({ delay }) => delay <= ceiling);
    const sizes = shown.map(({ subgroupSize }) => subgroupSize);
    const plot = panel({
      top,
      height: 230,
      x: {
        domain: [Math.min(...sizes), Math.max(...sizes)],
        figures: 'count',
        title: 'accounts a point',
      },
      y: {
        domain: [0, Math.max(...shown.map(({ delay }) => delay)) * 1.1],
        nice: true,
        figures: 'number',
        title: `${inflowPerWeek > 0 ? 'weeks' : 'new accounts'} until ${moveNoun(move)} is flagged (${percent(assumedRate)} to ${percent(movedRate)})`,
      },
    });
    const drawn: Ink = ink(
      line(
        plot,
        shown.map(({ subgroupSize, delay }) => ({ x: subgroupSize, y: delay })),
        { color: WATER_EDGE, width: 2.6 },
      ),
      dots(
        plot,
        marked.map(({ subgroupSize, delay, offer }) => ({
          x: subgroupSize,
          y: delay,
          look: offer.chosen ? { ...DOT, area: 190, fill: LEVEL, stroke: LEVEL } : RING,
        })),
      ),
    );
    return {
      ink: ink(
        drawn,
        plot.axes,
        callouts(
          plot,
          [...marked]
            .sort((a, b) => Number(b.offer.chosen) - Number(a.offer.chosen))
            .map(({ subgroupSize, delay, offer }) => ({
              x: subgroupSize,
              y: delay,
              words: `${count(subgroupSize)}: ${offer.reasons.map((reason) => SHORT[reason](findings)).join('; ')}`,
              color: offer.chosen ? LEVEL : INK,
              bold: offer.chosen,
              most: 240,
            })),
          [drawn],
        ),
      ),
      bottom: plot.bottom,
    };
  };
}

const SHORT: Record<SizeReason, (findings: PlanFindings) => string> = {
  'five-losses': () => 'five losses each',
  'positive-lower-limit': () => 'one low point can stand out',
  'sees-move': ({ within }) => `flagged within ${within} points, 4 in 5`,
  asked: () => 'as asked',
  recommended: () => 'few enough points to read',
};

function notes(findings: PlanFindings): PlateNote[] {
  const { months, inflowPerWeek, usualHazard, tenure, curve, offers } = findings;
  const list: PlateNote[] = [];
  if (months.length > 0) {
    list.push({ words: 'a month’s share, with its 95 % interval', sign: { mark: DOT } });
    if (months.some(({ risky }) => risky))
      list.push({
        words: 'a risky month: more leave than in a usual one, beyond chance',
        color: EMBER,
        sign: { mark: STANDOUT },
      });
    if (usualHazard !== null)
      list.push({ words: `the usual month: ${percent(usualHazard)}`, sign: { line: LEVEL, width: 2.4, dash: [7, 6] } });
  }
  if (curve.length >= 2) {
    list.push({
      words: `the size in use; hollow: the other sizes on offer`,
      sign: { mark: { ...DOT, area: 150, fill: LEVEL, stroke: LEVEL } },
    });
    list.push({
      words: 'teeth in the curve: counts are whole, so a larger size can see a little less',
      sign: { line: WATER_EDGE },
    });
    const alarms = offers.flatMap(({ subgroupSize, falseAlarmEvery }) =>
      falseAlarmEvery === null ? [] : [`${count(falseAlarmEvery)} at ${count(subgroupSize)}`],
    );
    if (alarms.length > 0)
      list.push({
        words: `small sizes raise more false flags: one in about so many points, ${alarms.join(', ')}`,
        sign: 'heed',
      });
    if (inflowPerWeek > 0)
      list.push({
        words: `mean wait at ${count(Math.max(1, inflowPerWeek))} accounts a week; add the ${tenure} until an account is old enough`,
        sign: 'heed',
      });
  }
  return list;
}

/** The plan's picture for those who cannot see it. */
export function planAltText(findings: PlanFindings): string {
  const { tenure, months, offers, movedRate, move } = findings;
  const risky = riskiest(months).sort((a, b) => a.month - b.month);
  const above =
    months.length === 0
      ? 'No month of tenure could be measured.'
      : `Above, the share leaving in each of the first ${counted(months.length, 'month')}: ${
          risky.length === 0
            ? 'no month stands out'
            : `${listed(risky.map(({ month, hazard }) => `month ${month} (${percent(hazard.estimate)})`))} ${risky.length === 1 ? 'stands' : 'stand'} out`
        }; churn is read at ${tenure}.`;
  const below =
    movedRate === null
      ? ''
      : ` Below, the mean wait until ${moveNoun(move)} is flagged, by accounts a point: ${listed(
          offers.flatMap(({ subgroupSize, delayWeeks, chosen }) =>
            delayWeeks === null
              ? []
              : [`${count(subgroupSize)}${chosen ? ' (in use)' : ''} ${weeksInWords(delayWeeks)}`],
          ),
        )}.`;
  return `How to count: ${above}${below}`;
}
