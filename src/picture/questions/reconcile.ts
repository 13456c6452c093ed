import type { Candidate, ReconcileFindings } from '../../verdict/questions/reconcile/findings.ts';
import { reportedWords } from '../../verdict/questions/reconcile/words.ts';
import { countOf, heldDate } from '../figures.ts';
import { EMBER, HAIRLINE, INK, LEVEL, MARGIN, QUIET, TEXT_SIZE } from '../palette.ts';
import { type Ink, ink, placed } from '../panel/ink.ts';
import { panel } from '../panel/panel.ts';
import { type Part, plate } from '../panel/plate.ts';
import { DOT, dots, RING, STANDOUT, upright } from '../panel/shapes.ts';
import type { Scene } from '../scene.ts';
import { wrapText } from '../wrapText.ts';

/** The rows of the strip, from top to bottom. */
const ROWS: readonly { readonly way: Candidate['way']; readonly name: string }[] = [
  { way: 'over-start', name: 'over customers at the start' },
  { way: 'of-start', name: 'only those there at the start' },
  { way: 'over-average', name: 'over the average of start and end' },
  { way: 'over-start-plus-new', name: 'over start plus new' },
  { way: 'mean-of-months', name: 'mean of monthly rates' },
  { way: 'pooled-months', name: 'all months added up' },
  { way: 'times-to-year', name: 'monthly rate times twelve' },
  { way: 'compounded-to-year', name: 'compounded to a year' },
  { way: 'census', name: 'equal-tenure census' },
];

const NAMES_WIDE = 212;
const ROW_HIGH = 54;

/** Small, so that a dozen months beside each other stay apart. */
const MONTH = { ...RING, area: 46, strokeWidth: 1.6 };

/** All figures that were tried on one axis, a row for each way, with the reported figure and the census across. */
export function reconcileScene(
  findings: ReconcileFindings,
  title: string,
  lead: string,
  subject: string,
  asOf: number,
): Scene {
  const { candidates, matched, census, reported } = findings;
  const end = axisEnd(findings);
  const beyond = candidates.filter(({ value }) => value > end).length;
  const rows = ROWS.filter(({ way }) => candidates.some((one) => one.way === way));
  const hit = new Set(matched.giving);
  const strip: Part = (top) => {
    const head = 30;
    const plot = panel({
      top: top + head,
      height: rows.length * ROW_HIGH,
      left: MARGIN + NAMES_WIDE,
      x: { domain: [0, end], figures: 'percent' },
      y: { domain: [0, rows.length], ticks: [] },
    });
    const at = (row: number): number => rows.length - row - 0.5;
    const names = rows.flatMap(({ name }, row): Ink[] => {
      const lines = wrapText(name, NAMES_WIDE - 12, TEXT_SIZE, 400);
      const first = plot.y(at(row)) + 7 - ((lines.length - 1) * 23) / 2;
      return [
        { texts: lines.map((line, i) => placed(line, MARGIN, first + i * 23, { color: INK, role: 'row' })) },
        {
          under: [
            {
              x: plot.frame.left,
              x2: plot.frame.right,
              y: plot.y(at(row)),
              y2: plot.y(at(row)),
              color: HAIRLINE,
              width: 1.4,
            },
          ],
        },
      ];
    });
    const marks = rows.flatMap(({ way }, row) =>
      candidates
        .filter((one) => one.way === way && one.value <= end)
        .sort((a, b) => Number(hit.has(a)) - Number(hit.has(b)))
        .map((one) => ({
          x: one.value,
          y: at(row),
          look: hit.has(one) ? STANDOUT : one.period?.kind === 'month' ? MONTH : DOT,
        })),
    );
    const label = placed(`reported: ${reportedWords(findings)}`, 0, top + 18, {
      color: EMBER,
      weight: 700,
      role: 'reported',
    });
    return {
      bottom: plot.bottom,
      ink: ink(
        plot.axes,
        ...names,
        census && census.value <= end ? upright(plot, census.value, { color: LEVEL, width: 2.4, dash: [9, 5] }) : {},
        upright(plot, reported.rate, { color: EMBER, width: 2.6, top: top + 24 }),
        dots(plot, marks),
        { texts: [inside(label, plot.x(reported.rate), plot.frame.left, plot.frame.right)] },
      ),
    };
  };
  return plate(
    {
      title,
      moved: candidates.length > 0 && matched.giving.length === 0,
      lead,
      counted: [subject, `data to ${heldDate(asOf)}`],
      keys:
        candidates.length === 0
          ? []
          : [
              { words: 'a single month', sign: { mark: MONTH } },
              { words: 'a longer time', sign: { mark: DOT } },
              ...(matched.giving.length > 0
                ? [{ words: 'rounds to the reported figure', sign: { mark: STANDOUT } }]
                : []),
              ...(census && census.value <= end
                ? [
                    {
                      words: `census at ${census.tenure ?? ''}`,
                      sign: { line: LEVEL, width: 2.4, dash: [9, 5] as const },
                    },
                  ]
                : []),
            ],
    },
    candidates.length === 0 ? [] : [strip],
    [
      ...(beyond > 0
        ? [
            {
              words: `${countOf(beyond, 'figure')} ${beyond === 1 ? 'lies' : 'lie'} further right than is drawn`,
              color: QUIET,
            },
          ]
        : []),
      { words: 'which calculation is right, your company’s written definition decides', sign: 'heed' as const },
    ],
  );
}

/** Up to where figures are drawn: far enough for the reported one, the census and most others, without squeezing them for a few. */
function axisEnd({ candidates, census, reported }: ReconcileFindings): number {
  const wanted = Math.max(reported.rate * 1.25, (census?.value ?? 0) * 1.25, 0.002);
  const room = 2 * Math.max(reported.rate, census?.value ?? 0, 0.002);
  const most = Math.max(0, ...candidates.map(({ value }) => value).filter((value) => value <= room));
  return Math.max(wanted, most * 1.06);
}

/** A centred text, moved in where it would leave the plot. */
function inside(text: ReturnType<typeof placed>, x: number, left: number, right: number): ReturnType<typeof placed> {
  const middle = (left + right) / 2;
  return x < middle
    ? { ...text, x: Math.max(left, x - 8), align: 'left' }
    : { ...text, x: Math.min(right, x + 8), align: 'right' };
}

/** For those who cannot see the picture. */
export function reconcileAlt(findings: ReconcileFindings, headline: string): string {
  const { candidates, census, matched } = findings;
  const values = candidates.map(({ value }) => value);
  const range =
    values.length === 0
      ? 'Nothing could be worked out.'
      : `A strip of ${values.length} figures, a row for each calculation, from ${words(Math.min(...values))} to ${words(Math.max(...values))}; ${matched.giving.length === 0 ? 'none lies' : matched.giving.length === 1 ? 'one lies' : `${matched.giving.length} lie`} on the reported ${reportedWords(findings)}.`;
  const line = census ? ` The census at ${census.tenure ?? ''} is ${words(census.value)}.` : '';
  return `${headline} ${range}${line}`.slice(0, 1000);
}

const words = (rate: number): string => `${(rate * 100).toFixed(1)} %`;
