import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { ReadReport } from '../../src/accounts/types.ts';
import type { Answer } from '../../src/answers/types.ts';
import type { Message } from '../../src/channel/messages/blocks.ts';
import { dateOrderMessage } from '../../src/channel/messages/dateOrderMessage.ts';
import { errorMessage, unexpectedMessage } from '../../src/channel/messages/errorMessage.ts';
import { mendLoading, mendModal } from '../../src/channel/messages/mendModal.ts';
import { moreMessage } from '../../src/channel/messages/moreLines.ts';
import {
  cannotReadMessage,
  commandRoot,
  helpMessage,
  joinedMessage,
  noDataMessage,
} from '../../src/channel/messages/plainMessages.ts';
import { readingMessage, readMessage } from '../../src/channel/messages/readMessage.ts';
import { code, inert } from '../../src/channel/messages/text.ts';
import { saidBy, verdictMessage } from '../../src/channel/messages/verdictMessage.ts';
import { EbbError } from '../../src/errors.ts';
import { checkMessageBlocks, checkView } from '../../src/practice/wire/checkBlocks.ts';
import { LIMITS } from '../../src/practice/wire/limits.ts';
import { hygieneOf } from '../practice/hygiene.ts';

/** Texts as somebody may write them into a header or a cell: long, empty, marked up, out of the ordinary. */
const written = fc.oneof(
  fc.string({ maxLength: 60, unit: 'grapheme' }),
  fc.constantFrom(
    '<!channel>',
    '<https://x.example|here>',
    '*bold* _it_ ~no~ `code`',
    '&amp;',
    '',
    ' ',
    'plan',
    '\u202Eback',
    'a\nb',
  ),
  fc.string({ minLength: 200, maxLength: 6000 }),
);
const count = fc.nat({ max: 5_000_000 });
const day = fc.integer({ min: 0, max: 40_000 });

const report: fc.Arbitrary<ReadReport> = fc.record({
  rows: count,
  accounts: count,
  returned: count,
  mergedRows: count,
  asOf: day,
  inferredAsOf: fc.integer({ min: 15_000, max: 22_000 }),
  asOfSource: fc.constantFrom('given', 'latest-date'),
  futureEnds: count,
  firstStart: day,
  lastStart: day,
  columns: fc.record({ start: written, end: written, id: written, segment: written }),
  headers: fc.array(written, { minLength: 1, maxLength: 150 }),
  dates: fc.constantFrom('iso' as const, 'dmy' as const, 'mdy' as const),
  datesSource: fc.constant('values' as const),
  encoding: fc.constant('utf-8'),
  delimiter: fc.constant(','),
  rejected: fc.array(
    fc.record({
      code: fc.constant('x'),
      reason: written,
      rows: count,
      firstLine: count,
      examples: fc.array(fc.record({ line: count, value: written }), { maxLength: 3 }),
    }),
    { maxLength: 20 },
  ),
  segments: fc.array(fc.record({ value: written, accounts: count }), { maxLength: 50 }),
});

const answer: fc.Arbitrary<Answer> = fc
  .record({
    headline: written,
    evidence: fc.array(written, { maxLength: 40 }),
    cautions: fc.array(written, { maxLength: 20 }),
    next: fc.array(written, { maxLength: 10 }),
    altText: written,
  })
  .map(
    ({ altText, ...words }) =>
      ({
        verdict: { ...words, headline: words.headline || 'Churn is steady.' },
        signals: [{ words: 'one point above' }],
        picture: { png: new Uint8Array(1), altText },
      }) as unknown as Answer,
  );

/** Held against the stand-in's schemas: what it refuses, the real service refuses too. */
function isPostable(message: Message): void {
  expect(message.text.trim()).not.toBe('');
  expect(message.text.length).toBeLessThanOrEqual(LIMITS.updateText);
  checkMessageBlocks(message.blocks, () => true);
  // A button's value comes back to us and is never shown.
  expect(hygieneOf(message).filter((finding) => !finding.where.endsWith('/value'))).toEqual([]);
}

describe('messages keep within the platform’s limits and let no mark-up through, whatever a file holds', () => {
  it('what was read', () => {
    fc.assert(
      fc.property(report, written, (one, name) => isPostable(readMessage(one, name, { upload: 'u1' }))),
      { numRuns: 150 },
    );
  });

  it('the verdict', () => {
    const words = fc.record({
      understood: written,
      notUnderstood: fc.array(fc.record({ text: written, nearest: written }), { maxLength: 9 }),
    });
    fc.assert(
      fc.property(answer, fc.option(words), fc.boolean(), written, (one, asked, pictured, again) =>
        isPostable(verdictMessage(saidBy(one), asked, pictured ? 'F0123456789' : null, again || 'has churn moved?')),
      ),
      { numRuns: 150 },
    );
  });

  it('errors, the question about dates, and the rest', () => {
    fc.assert(
      fc.property(written, written, written, (a, b, c) => {
        isPostable(errorMessage(new EbbError('COLUMN_START_MISSING', a || 'x', b), c, { upload: 'u1' }));
        isPostable(errorMessage(new EbbError('SEGMENT_UNKNOWN', a || 'x', b)));
        const detail = { line: 4, column: a, text: b, dmy: '2025-02-01', mdy: '2025-01-02', iso: null };
        isPostable(dateOrderMessage(new EbbError('DATES_AMBIGUOUS', 'x', 'y', { detail }), c, 'u1'));
        isPostable(readingMessage(a));
        isPostable(cannotReadMessage(a, 'kind'));
        isPostable(commandRoot('U0WREN00001', a));
      }),
    );
    for (const message of [helpMessage(), joinedMessage(), noDataMessage(true), unexpectedMessage('ABC234')])
      isPostable(message);
    const [, select] = dateOrderMessage(
      new EbbError('DATES_AMBIGUOUS', 'x', 'y', { detail: {} }),
      'a.csv',
      'u1',
    ).blocks;
    expect(JSON.stringify(select)).toContain('Day first');
  });

  it('the mend modal, also with more columns than a select holds, and the chosen one among the last', () => {
    const place = { target: { upload: 'u1' }, channel: 'C1', threadTs: '1.2' };
    fc.assert(
      fc.property(fc.array(written, { minLength: 1, maxLength: 150 }), written, (headers, fileName) => {
        const chosen = headers.at(-1)!;
        const view = mendModal(place, {
          fileName,
          headers,
          columns: { start: chosen, id: 'not there' },
          dates: 'dmy',
          asOf: 20_000,
        });
        checkView(view, () => true);
        const start = JSON.stringify(view.blocks.find((block) => block.block_id === 'mend_start'));
        expect(start).toContain(`"initial_option"`);
      }),
      { numRuns: 60 },
    );
    checkView(mendLoading(place), () => true);
  });
});

describe('a long verdict', () => {
  const lines = (word: string, count: number): string[] => Array.from({ length: count }, (_, i) => `${word} ${i + 1}.`);
  const posted = (evidence: string[], cautions: string[]) => {
    const verdict = { headline: 'Churn is steady.', evidence, cautions, next: ['next 1.'] };
    const { blocks } = verdictMessage(
      { ...verdict, picture: null, signals: [{ words: 'one flag' }] },
      null,
      null,
      'has churn moved?',
    );
    const elements = blocks.flatMap((block) => (block.type === 'actions' ? block.elements : []));
    const more = elements.find((element) => 'action_id' in element && element.action_id === 'more_lines');
    const shown = JSON.stringify(blocks.filter((block) => block.type === 'section'));
    return { shown, more: more && 'value' in more ? moreMessage(JSON.parse(more.value as string)) : undefined };
  };

  it('shows six lines of evidence and four cautions, the last among them, and the rest behind a button', () => {
    const { shown, more } = posted(lines('fact', 8), lines('caution', 7));
    expect(shown).toContain('fact 6.');
    expect(shown).not.toContain('fact 7.');
    expect(shown.match(/caution \d/g)).toEqual(['caution 1', 'caution 2', 'caution 3', 'caution 7']);
    expect(more!.text.split('\n')).toEqual(
      ['fact 7.', 'fact 8.', 'caution 4.', 'caution 5.', 'caution 6.'].map((l) => `• ${l}`),
    );
    isPostable(more!);
  });

  it('puts flags after the first behind the button before how far they can be trusted', () => {
    const flags = ['One flag, first.', 'One flag, second.', 'One flag, third.', '3 further flags of the same kind.'];
    const { shown, more } = posted([...flags, ...lines('trust', 5)], []);
    expect(shown).toMatch(/One flag, first.*trust 1.*trust 5/);
    expect(shown).not.toContain('second');
    expect(more!.text.split('\n')).toHaveLength(3);
  });

  it('shows all when little is left over, or when the rest does not fit into the button', () => {
    expect(posted(lines('fact', 7), lines('caution', 4)).more).toBeUndefined();
    expect(posted(lines('fact', 7), lines('caution', 4)).shown).toContain('fact 7.');
    const long = posted(lines('x'.repeat(400), 14), []);
    expect(long.more).toBeUndefined();
  });

  it('keeps the order of the command line: what it rests on, keep in mind, what next', () => {
    const { shown } = posted(['a.'], ['b.']);
    expect(shown.match(/What it rests on|Keep in mind|What next/g)).toEqual([
      'What it rests on',
      'Keep in mind',
      'What next',
    ]);
  });
});

describe('somebody else’s text', () => {
  it('is shown as it is and can do nothing', () => {
    expect(inert('a < b & c')).toBe('a &lt; b &amp; c');
    expect(inert('start_date')).toBe('start_date');
    expect(inert('*bold*')).toBe('\u2060*bold\u2060*');
    expect(code('a`b')).toBe('`aˋb`');
    expect(code('x'.repeat(100))).toHaveLength(82);
    expect(code(' \n')).toBe('(no name)');
  });

  it('loses the hints that only a command line understands', () => {
    const hint =
      'Say which one it is (on the command line: --columns start=NAME), or export with a column such as "start".';
    expect(errorMessage(new EbbError('COLUMN_START_MISSING', 'no start', hint), 'a.csv').text).toContain(
      'Say which one it is, or export with',
    );
  });
});
