import type { Chart, ChartPoint } from '../../charts/types.ts';
import { count, counted, listed } from './format.ts';

/** Fewer losses a point than this make three sigma limits rough. Common practice, no source. */
const FEW = 5;
/** Points told by number. */
const TOLD = 4;
/** Rates that are equal by arithmetic are equal. */
const TOUCH = 1e-9;

type Exact = ChartPoint & { readonly exactLower: number; readonly exactUpper: number };

/**
 * What the exact binomial limits say beside the three sigma ones: told where a point is flagged by one and not by the other, or where so
 * few losses are to be expected that three sigma are rough. Null when neither is so, or the chart has no exact limits.
 */
export function exactLimitsSentence(chart: Chart): string | null {
  const points = chart.points.filter((point): point is Exact => point.exactUpper !== undefined);
  const last = points.at(-1);
  if (last === undefined || chart.center <= 0 || chart.center >= 1) return null;
  const outside = (point: ChartPoint, lower: number, upper: number): boolean =>
    point.value < lower - TOUCH || point.value > upper + TOUCH;
  const drawn = points.filter(
    (point) => outside(point, point.lower, point.upper) && !outside(point, point.exactLower, point.exactUpper),
  );
  const exact = points.filter(
    (point) => !outside(point, point.lower, point.upper) && outside(point, point.exactLower, point.exactUpper),
  );
  const expected = Math.min(chart.center, 1 - chart.center) * last.accounts;
  if (expected >= FEW && drawn.length + exact.length === 0) return null;

  const few = `${expected < 0.05 ? 'hardly any' : `about ${expected.toFixed(1)}`} ${chart.center > 0.5 ? 'kept' : 'lost'} a point`;
  const what = expected < FEW ? `With ${few} to be expected, three sigma limits are rough. ` : '';
  const differ = [
    drawn.length > 0
      ? `${named(drawn)} beyond the drawn limits and within the exact ones: no flag by ${drawn.length === 1 ? 'itself' : 'themselves'}`
      : null,
    exact.length > 0 ? `${named(exact)} within the drawn limits and beyond the exact ones: worth a look` : null,
  ].filter((part) => part !== null);
  return `${what}Counted out exactly (binomial limits, as strict as three sigma of a normal value), ${allowed(last)}${
    differ.length > 0 ? `; ${differ.join('; ')}` : ''
  }.`;
}

/** What the limits let pass at the newest point's size, exact against drawn. */
function allowed(point: Exact): string {
  const { accounts } = point;
  const drawn = range(Math.ceil(point.lower * accounts - TOUCH), Math.floor(point.upper * accounts + TOUCH));
  const exact = range(Math.round(point.exactLower * accounts), Math.round(point.exactUpper * accounts));
  return drawn === exact
    ? `chance allows ${exact} of ${count(accounts)} lost, as the drawn limits do`
    : `chance allows ${exact} of ${count(accounts)} lost, where the drawn limits allow ${drawn}`;
}

const range = (lowest: number, highest: number): string =>
  lowest === highest
    ? `only ${count(highest)}`
    : lowest > 0
      ? `${count(lowest)} to ${count(highest)}`
      : `up to ${count(highest)}`;

function named(points: readonly ChartPoint[]): string {
  const numbers = points.slice(0, TOLD).map(({ index }) => String(index));
  const rest = points.length - numbers.length;
  const all = listed(rest > 0 ? [...numbers, counted(rest, 'more', 'more')] : numbers);
  return points.length === 1 ? `point ${all} lies` : `points ${all} lie`;
}
