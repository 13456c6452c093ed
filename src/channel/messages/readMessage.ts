import type { ReadReport } from '../../accounts/types.ts';
import { readText } from '../../verdict/words/readText.ts';
import type { MendTarget } from '../inbox.ts';
import { ACTION } from '../names.ts';
import { bullets, button, type Message, message, section } from './blocks.ts';
import { code, inert, shortened } from './text.ts';

/**
 * What was read, with the means to mend it.
 * @param lead   "Read" or "Read again"
 * @param change what it changes about the export before it
 */
export function readMessage(
  report: ReadReport,
  name: string,
  target: MendTarget,
  lead = 'Read',
  change: readonly string[] = [],
): Message {
  const [first = '', ...rest] = readText(report, shortened(name, 120)).map(inert);
  const opening = first.replace(/^Read /, `${lead}: `);
  const segments = segmentLine(report);
  const examples = report.rejected
    .flatMap((entry) => entry.examples.filter((one) => one.value.trim() !== '').slice(0, 1))
    .slice(0, 3)
    .map((one) => `line ${one.line} ${code(one.value, 40)}`);
  const changed = change.map(inert);
  const lines = [
    ...changed,
    ...rest,
    ...(segments === undefined ? [] : [segments]),
    ...(examples.length > 0 ? [`For example ${examples.join(', ')}.`] : []),
  ];
  return message(
    [opening, ...changed, ...rest],
    [
      section([`*${opening}*`, ...bullets(lines)]),
      { type: 'actions', elements: [button('Correct this', ACTION.mend, JSON.stringify(target))] },
    ],
  );
}

function segmentLine(report: ReadReport): string | undefined {
  if (report.columns.segment === undefined || report.segments.length === 0) return undefined;
  const shown = report.segments
    .slice(0, 6)
    .map((one) => `${code(one.value, 40)} ${one.accounts.toLocaleString('en-US')}`);
  const more = report.segments.length - shown.length;
  return `Groups in ${code(report.columns.segment)}: ${shown.join(', ')}${more > 0 ? ` and ${more} more` : ''}.`;
}

/** Said early when a file takes a while; replaced by what was read. */
export function readingMessage(name: string): Message {
  const line = `Reading ${code(name)} …`;
  return message([line], [section([line])]);
}
