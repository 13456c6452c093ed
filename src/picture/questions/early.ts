import { type Day, dayInWords } from '../../days.ts';
import { aimOf } from '../../verdict/questions/early.ts';
import { type EarlyFindings, leading, moodOf, type WatchState } from '../../verdict/questions/earlyFindings.ts';
import type { Verdict } from '../../verdict/types.ts';
import { count, counted, percent } from '../../verdict/words/format.ts';
import { dateShort } from '../figures.ts';
import { EMBER, LEVEL, QUIET, WATER_EDGE, WATER_PALE } from '../palette.ts';
import { type Ink, ink } from '../panel/ink.ts';
import { endLabels, endLabelsRoom } from '../panel/labels.ts';
import { type Panel, panel } from '../panel/panel.ts';
import { plate } from '../panel/plate.ts';
import { dots, level, line, STANDOUT, upright } from '../panel/shapes.ts';
import type { Tick } from '../panel/ticks.ts';
import type { Scene } from '../scene.ts';

/** The way of one sum: part of the way to its alarm after so many accounts. */
export interface SumPath {
  readonly path: readonly { readonly place: number; readonly share: number }[];
  /** stretches in alarm, by place */
  readonly alarms: readonly { readonly at: number; readonly until: number }[];
}

export interface EarlyDrawing {
  readonly found: EarlyFindings;
  /** the place after which the drawn stretch begins; 0 for all watched accounts */
  readonly from: number;
  readonly rise: SumPath;
  readonly fall: SumPath;
  /** start days of the accounts at some places, in order */
  readonly starts: readonly { readonly place: number; readonly start: Day }[];
  readonly subject: string;
  readonly asOf: Day;
  /** given when the picture is that of a verdict and not of the early watch */
  readonly verdict?: Pick<Verdict, 'outcome' | 'headline'>;
}

/** Both sums of the early watch against their limits: towards a rise upwards, towards a fall downwards. */
export function earlyScene(drawing: EarlyDrawing): Scene {
  const { found, from, rise, fall, starts, subject, asOf, verdict } = drawing;
  const state = leading(found);
  const mood = moodOf(state);
  const highest = reach(rise);
  const lowest = reach(fall);
  const ends = [
    { y: 1, lines: ['alarm:', 'rise to', percent(found.rise.to)], color: EMBER },
    { y: 0, lines: ['zero'], color: QUIET },
    { y: -1, lines: ['alarm:', 'fall to', percent(found.fall.to)], color: EMBER },
  ];
  return plate(
    {
      title: titleOf(drawing),
      moved: verdict ? verdict.outcome === 'risen' || verdict.outcome === 'fallen' : mood === 'alarm',
      ...(verdict ? { lead: leadOf(verdict.headline) } : {}),
      counted: [
        `Lost within ${found.tenure} of starting, account by account`,
        subject,
        `usual level ${percent(found.usual.rate)}`,
        `data to ${dayInWords(asOf)}`,
      ],
      keys: [
        { words: 'sum of the evidence', sign: { line: LEVEL } },
        ...(rise.alarms.length + fall.alarms.length > 0 ? [{ words: 'in alarm', sign: { line: EMBER } }] : []),
        { words: 'below an alarm', sign: { area: WATER_PALE } },
      ],
    },
    [
      (top) => {
        const plot = panel({
          top,
          height: 380,
          rightRoom: endLabelsRoom(ends),
          x: {
            domain: [from, found.watched.accounts],
            ticks: starts.map(({ place, start }): Tick => ({ at: place, lines: dateLines(start) })),
            title: `${accountsDrawn(drawing)} in order of start; dates are starts`,
          },
          y: {
            domain: [-lowest, highest],
            ticks: ticks(lowest, highest),
            title: 'part of the way to an alarm: up for a rise, down for a fall',
          },
        });
        return {
          bottom: plot.bottom,
          ink: ink(
            water(plot),
            plot.axes,
            level(plot, 0, { color: WATER_EDGE, width: 1.6 }),
            level(plot, 1, { color: EMBER, width: 2, dash: [7, 5] }),
            level(plot, -1, { color: EMBER, width: 2, dash: [7, 5] }),
            sumInk(plot, rise, 1),
            sumInk(plot, fall, -1),
            ...(mood === 'quiet' || zeroPlace(state, drawing) === null
              ? []
              : [upright(plot, zeroPlace(state, drawing)!, { color: QUIET, width: 1.6, dash: [3, 4] })]),
            endLabels(plot, ends),
          ),
        };
      },
    ],
    [
      ...(state.since !== null && mood !== 'quiet'
        ? [
            {
              words: `since the dotted line: accounts started from ${dateShort(state.since.start)}, about ${percent(state.since.rate.rate)} lost (${count(state.since.rate.lost)} of ${count(state.since.rate.accounts)})`,
            },
          ]
        : []),
      { words: `with nothing changed an alarm comes about once in ${count(found.falseAlarmEvery.accounts)} accounts` },
      ...(verdict ? [] : [{ words: 'an early watch, not the verdict', sign: 'heed' as const }]),
    ],
  );
}

/** Without a usual level there is nothing to draw but the reason. */
export function noWatchScene(headline: string, subject: string, asOf: Day): Scene {
  return plate(
    {
      title: 'Early watch: not possible yet',
      lead: headline,
      counted: [subject, `data to ${dayInWords(asOf)}`],
    },
    [],
  );
}

const OUTCOMES: Readonly<Record<Verdict['outcome'], string>> = {
  risen: 'Churn has risen',
  fallen: 'Churn has fallen',
  steady: 'Churn is steady',
  'too-early': 'Too early to say',
  'cannot-say': 'Cannot say',
};

/** The headline without what the title says already. */
function leadOf(headline: string): string {
  const rest = headline.replace(/^[^:;]*: /, '');
  return rest.slice(0, 1).toUpperCase() + rest.slice(1);
}

function titleOf({ found, verdict }: EarlyDrawing): string {
  if (verdict) return OUTCOMES[verdict.outcome];
  const state = leading(found);
  const mood = moodOf(state);
  if (mood === 'alarm') return `Early watch: alarm, a ${state.direction}`;
  if (mood === 'climbing') return `Early watch: climbing, ${Math.floor(100 * state.share)} % of the way`;
  return 'Early watch: quiet';
}

/** "3,350 accounts", "the newest 6,700 of 785,982 accounts" */
function accountsDrawn({ found, from }: EarlyDrawing): string {
  const all = counted(found.watched.accounts, 'account');
  return from === 0 ? all : `the newest ${count(found.watched.accounts - from)} of ${all}`;
}

/** How far the axis goes on one side. */
function reach({ path }: SumPath): number {
  return Math.max(1.15, 1.06 * path.reduce((most, { share }) => Math.max(most, share), 0));
}

/** Distances of ticks, in ways to an alarm. */
const STEPS = [0.5, 1, 2, 5, 10, 20, 50, 100, 1_000];

function ticks(lowest: number, highest: number): Tick[] {
  const every = STEPS.find((step) => (lowest + highest) / step <= 9) ?? STEPS.at(-1)!;
  const values: number[] = [];
  for (let at = -Math.floor(lowest / every) * every; at <= highest; at += every) values.push(at);
  return values.map((at) => ({ at, lines: [`${Math.round(Math.abs(at) * 100)} %`] }));
}

function water(plot: Panel): Ink {
  const { left, right } = plot.frame;
  return { slabs: [{ x: left, x2: right, y: plot.y(1), y2: plot.y(-1), color: WATER_PALE }] };
}

function sumInk(plot: Panel, { path, alarms }: SumPath, sign: 1 | -1): Ink {
  const at = ({ place, share }: SumPath['path'][number]) => ({ x: place, y: sign * share });
  return ink(
    line(plot, path.map(at), { color: LEVEL, width: 2.4 }),
    ...beyond(path).map((run) => line(plot, run.map(at), { color: EMBER, width: 3 })),
    dots(
      plot,
      alarms.map((alarm) => ({ x: alarm.at, y: sign })),
      STANDOUT,
    ),
  );
}

/** The stretches of a path at or beyond the limit. */
function beyond(path: SumPath['path']): SumPath['path'][number][][] {
  const runs: SumPath['path'][number][][] = [];
  path.forEach((corner, i) => {
    if (corner.share < 1) return;
    if (i > 0 && path[i - 1]!.share >= 1) runs.at(-1)!.push(corner);
    else runs.push([corner]);
  });
  return runs;
}

/** The place after which the leading sum rose from zero. */
function zeroPlace(state: WatchState, { found }: EarlyDrawing): number | null {
  return state.since === null ? null : found.watched.accounts - state.since.rate.accounts;
}

const yearOf = (day: Day): string => dayInWords(day).split(' ').at(-1)!;

function dateLines(day: Day): string[] {
  const [date, month] = dayInWords(day).split(' ');
  return [`${date} ${month!.slice(0, 3)}`, yearOf(day)];
}

/** What the picture shows, for those who cannot see it. */
export function earlyAltText(drawing: EarlyDrawing): string {
  const { found, subject, verdict } = drawing;
  const parts = [found.rise, found.fall].map(
    (state) =>
      `towards ${aimOf(state)} the sum stands at ${Math.floor(100 * state.share)} % of the way to its alarm${state.since === null ? '' : `, rising from zero since accounts that started on ${dayInWords(state.since.start)}`}`,
  );
  return `${verdict ? verdict.headline.replace(/\.$/, '') : titleOf(drawing)}. Two sums over ${accountsDrawn(drawing)} of ${subject}, lost within ${found.tenure}: ${parts.join('; ')}.${verdict ? '' : ' This is an early watch, not the verdict.'}`;
}
