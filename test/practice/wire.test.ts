import { describe, expect, it } from 'vitest';
import { checkMessageBlocks, checkView } from '../../src/practice/wire/checkBlocks.ts';
import { LIMITS } from '../../src/practice/wire/limits.ts';
import { Refusal } from '../../src/practice/wire/refusal.ts';
import { hygieneOf } from './hygiene.ts';

const plain = (text: string) => ({ type: 'plain_text', text });
const mrkdwn = (text: string) => ({ type: 'mrkdwn', text });
const x = (n: number) => 'x'.repeat(n);
const times = <T>(n: number, make: (i: number) => T) => Array.from({ length: n }, (_, i) => make(i));
const option = (i: number, text = `o${i}`, value = `v${i}`) => ({ text: plain(text), value });
const actions = (element: object) => ({ type: 'actions', elements: [element] });
const button = (more: object) => actions({ type: 'button', action_id: 'a', text: plain('Go'), ...more });

function refusalOf(run: () => unknown): Refusal {
  try {
    run();
  } catch (error) {
    if (error instanceof Refusal) return error;
    throw error;
  }
  throw new Error('nothing was refused');
}

const accepted = (blocks: unknown) => checkMessageBlocks(blocks, () => true);
const refused = (blocks: unknown, showable = true) => refusalOf(() => checkMessageBlocks(blocks, () => showable));

/** At the limit taken, one beyond it refused at the named place. */
const limits: [string, (size: number) => object[], number, string][] = [
  ['blocks in a message', (n) => times(n, () => ({ type: 'divider' })), LIMITS.messageBlocks, '/blocks'],
  ['section text', (n) => [{ type: 'section', text: mrkdwn(x(n)) }], LIMITS.sectionText, '/blocks/0/text/text'],
  [
    'section fields',
    (n) => [{ type: 'section', fields: times(n, () => mrkdwn('f')) }],
    LIMITS.sectionFields,
    '/blocks/0/fields',
  ],
  ['field text', (n) => [{ type: 'section', fields: [mrkdwn(x(n))] }], LIMITS.fieldText, '/blocks/0/fields/0/text'],
  ['header text', (n) => [{ type: 'header', text: plain(x(n)) }], LIMITS.headerText, '/blocks/0/text/text'],
  [
    'context elements',
    (n) => [{ type: 'context', elements: times(n, () => mrkdwn('c')) }],
    LIMITS.contextElements,
    '/blocks/0/elements',
  ],
  [
    'actions elements',
    (n) => [{ type: 'actions', elements: times(n, (i) => ({ type: 'button', action_id: `a${i}`, text: plain('b') })) }],
    LIMITS.actionsElements,
    '/blocks/0/elements',
  ],
  ['button text', (n) => [button({ text: plain(x(n)) })], LIMITS.buttonText, '/blocks/0/elements/0/text/text'],
  ['button value', (n) => [button({ value: x(n) })], LIMITS.buttonValue, '/blocks/0/elements/0/value'],
  ['button url', (n) => [button({ url: x(n) })], LIMITS.url, '/blocks/0/elements/0/url'],
  ['action_id', (n) => [button({ action_id: x(n) })], LIMITS.id, '/blocks/0/elements/0/action_id'],
  ['block_id', (n) => [{ type: 'divider', block_id: x(n) }], LIMITS.id, '/blocks/0/block_id'],
  [
    'option text',
    (n) => [actions({ type: 'static_select', options: [option(0, x(n))] })],
    LIMITS.optionText,
    '/blocks/0/elements/0/options/0/text/text',
  ],
  [
    'option value',
    (n) => [actions({ type: 'static_select', options: [option(0, 'o', x(n))] })],
    LIMITS.optionValue,
    '/blocks/0/elements/0/options/0/value',
  ],
  [
    'select options',
    (n) => [actions({ type: 'static_select', options: times(n, (i) => option(i)) })],
    LIMITS.selectOptions,
    '/blocks/0/elements/0/options',
  ],
  [
    'overflow options',
    (n) => [actions({ type: 'overflow', options: times(n, (i) => option(i)) })],
    LIMITS.overflowOptions,
    '/blocks/0/elements/0/options',
  ],
  [
    'radio options',
    (n) => [actions({ type: 'radio_buttons', options: times(n, (i) => option(i)) })],
    LIMITS.choiceOptions,
    '/blocks/0/elements/0/options',
  ],
  [
    'checkbox options',
    (n) => [actions({ type: 'checkboxes', options: times(n, (i) => option(i)) })],
    LIMITS.choiceOptions,
    '/blocks/0/elements/0/options',
  ],
  [
    'placeholder',
    (n) => [actions({ type: 'datepicker', placeholder: plain(x(n)) })],
    LIMITS.placeholder,
    '/blocks/0/elements/0/placeholder/text',
  ],
  [
    'image alt text',
    (n) => [{ type: 'image', alt_text: x(n), image_url: 'https://example.org/a.png' }],
    LIMITS.imageAlt,
    '/blocks/0/alt_text',
  ],
  [
    'table rows',
    (n) => [{ type: 'table', rows: times(n, () => [{ type: 'raw_text', text: 'c' }]) }],
    LIMITS.tableRows,
    '/blocks/0/rows',
  ],
  [
    'table cells',
    (n) => [{ type: 'table', rows: [times(n, () => ({ type: 'raw_text', text: 'c' }))] }],
    LIMITS.tableCells,
    '/blocks/0/rows/0',
  ],
  ['table text', (n) => [{ type: 'table', rows: [[{ type: 'raw_text', text: x(n) }]] }], LIMITS.tableText, '/blocks/0'],
  [
    'input label',
    (n) => [{ type: 'input', label: plain(x(n)), element: { type: 'plain_text_input' } }],
    LIMITS.label,
    '/blocks/0/label/text',
  ],
];

describe('the published limits of blocks', () => {
  it.each(limits)('%s: taken at the limit, refused one beyond it', (_name, blocks, limit, place) => {
    expect(accepted(blocks(limit))).toHaveLength(blocks(limit).length);
    const refusal = refused(blocks(limit + 1));
    expect(refusal.error).toBe('invalid_blocks');
    expect(refusal.messages.join()).toContain(`[json-pointer:${place}]`);
  });

  it('refuses more text over all blocks than the service carries', () => {
    const blocks = times(5, () => ({ type: 'section', text: mrkdwn(x(2800)) }));
    expect(refused(blocks).error).toBe('msg_blocks_too_long');
  });

  it('takes one table and refuses a second', () => {
    const table = { type: 'table', rows: [[{ type: 'raw_text', text: 'c' }]] };
    expect(accepted([table])).toHaveLength(1);
    expect(refused([table, table]).messages.join()).toContain('only_one_table_allowed');
  });

  it.each([
    ['an unknown block', [{ type: 'carousel-of-wonders' }], '/blocks/0'],
    [
      'an image without alt text',
      [{ type: 'image', image_url: 'https://example.org/a.png' }],
      'missing required field: alt_text',
    ],
    [
      'an image with two sources',
      [{ type: 'image', alt_text: 'a', image_url: 'u', slack_file: { id: 'F0123456789' } }],
      '/blocks/0',
    ],
    [
      'a file id of the wrong shape',
      [{ type: 'image', alt_text: 'a', slack_file: { id: 'f1' } }],
      '/blocks/0/slack_file/id',
    ],
    ['an unknown property', [{ type: 'divider', colour: 'red' }], 'invalid additional property: colour'],
    ['an empty text', [{ type: 'section', text: mrkdwn('') }], '/blocks/0/text/text'],
    ['a section with nothing in it', [{ type: 'section' }], '/blocks/0'],
    ['markup in a header', [{ type: 'header', text: mrkdwn('*a*') }], '/blocks/0/text'],
    ['the same block_id twice', times(2, () => ({ type: 'divider', block_id: 'b' })), '/blocks/1/block_id'],
    [
      'the same action_id twice in a block',
      [{ type: 'actions', elements: times(2, () => ({ type: 'button', action_id: 'a', text: plain('b') })) }],
      '/blocks/0',
    ],
    [
      'a file input in a message',
      [{ type: 'input', label: plain('l'), element: { type: 'file_input' } }],
      '/blocks/0/element',
    ],
    ['a select with no options', [actions({ type: 'static_select' })], '/blocks/0/elements/0'],
    ['blocks that are no list', 'text', '/blocks'],
  ])('refuses %s, naming the place', (_name, blocks, place) => {
    expect(refused(blocks).messages.join()).toContain(place);
  });

  it('refuses a picture whose file is unknown, unprocessed or of a kind that is not shown, in the words apps look for', () => {
    const blocks = [{ type: 'divider' }, { type: 'image', alt_text: 'a', slack_file: { id: 'F0123456789' } }];
    expect(accepted(blocks)).toHaveLength(2);
    expect(refused(blocks, false).messages[0]).toContain('invalid slack file [json-pointer:/blocks/1/slack_file]');
  });
});

describe('views', () => {
  const modal = (more: object) => ({ type: 'modal', title: plain('T'), blocks: [], ...more });
  const check = (view: unknown) => checkView(view, () => true);

  it.each([
    ['title', (n: number) => modal({ title: plain(x(n)) }), LIMITS.modalTitle, '/view/title/text'],
    ['submit', (n: number) => modal({ submit: plain(x(n)) }), LIMITS.modalTitle, '/view/submit/text'],
    ['close', (n: number) => modal({ close: plain(x(n)) }), LIMITS.modalTitle, '/view/close/text'],
    [
      'private_metadata',
      (n: number) => modal({ private_metadata: x(n) }),
      LIMITS.privateMetadata,
      '/view/private_metadata',
    ],
    ['callback_id', (n: number) => modal({ callback_id: x(n) }), LIMITS.id, '/view/callback_id'],
    [
      'blocks',
      (n: number) => modal({ blocks: times(n, () => ({ type: 'divider' })) }),
      LIMITS.viewBlocks,
      '/view/blocks',
    ],
  ])('%s: taken at the limit, refused one beyond it', (_name, view, limit, place) => {
    expect(check(view(limit)).type).toBe('modal');
    expect(refusalOf(() => check(view(limit + 1))).messages.join()).toContain(`[json-pointer:${place}]`);
  });

  it('refuses a form without a way to hand it in', () => {
    const blocks = [{ type: 'input', label: plain('l'), element: { type: 'plain_text_input' } }];
    expect(refusalOf(() => check(modal({ blocks }))).messages.join()).toContain('/view/submit');
    expect(check(modal({ blocks, submit: plain('Go') })).blocks).toHaveLength(1);
  });

  it('refuses a view larger than the service carries', () => {
    const blocks = times(99, () => ({ type: 'section', text: mrkdwn(x(2900)) }));
    expect(refusalOf(() => check(modal({ blocks }))).error).toBe('view_too_large');
  });
});

describe('hygiene of what was posted', () => {
  it('finds calls to everyone and links that hide their address, and blocks without a text', () => {
    const blocks = [
      { type: 'section', text: mrkdwn('a <!channel> b') },
      { type: 'section', text: mrkdwn('<https://a.example|here>') },
    ];
    expect(hygieneOf({ blocks }).map((f) => f.what)).toEqual(['text-missing', 'broadcast', 'masked-link']);
  });
  it('leaves escaped text and plain text alone', () => {
    const blocks = [
      { type: 'section', text: mrkdwn('&lt;!channel&gt;') },
      { type: 'section', text: plain('<!channel>') },
    ];
    expect(hygieneOf({ text: 'said', blocks })).toEqual([]);
  });
});
