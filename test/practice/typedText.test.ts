import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { formatDate, parseInline, parseMrkdwn } from '../../src/practice/page/reading/mrkdwn.ts';
import type { PracticeService } from '../../src/practice/service.ts';
import { startService } from './support.ts';

describe('what a person types', () => {
  let service: PracticeService;
  beforeAll(async () => {
    service = await startService();
  });
  afterAll(() => service.close());

  it.each([
    ['@ebbline has churn moved?', '<@U0EBBLINE01> has churn moved?'],
    ['ask <@U0WREN00001> in #launches', 'ask <@U0WREN00001> in <#C0LAUNCHES1|launches>'],
    ['5 < 6 & <!channel>', '5 &lt; 6 &amp; &lt;!channel&gt;'],
    ['mail me@ebbline.example', 'mail me@ebbline.example'],
    ['see https://example.org/a?b=1&c=2.', 'see <https://example.org/a?b=1&amp;c=2>.'],
    ['@nobody', '@nobody'],
  ])('%s is stored as %s', (typed, stored) => {
    expect(service.as('wren').say('retention', typed).text).toBe(stored);
  });
});

describe('reading the markup', () => {
  it('tells bold, italic, struck, code and links apart, and nests them', () => {
    expect(parseInline('*a _b_* `*c*` <https://x.org|d>')).toEqual([
      {
        kind: 'bold',
        parts: [
          { kind: 'text', text: 'a ' },
          { kind: 'italic', parts: [{ kind: 'text', text: 'b' }] },
        ],
      },
      { kind: 'text', text: ' ' },
      { kind: 'code', text: '*c*' },
      { kind: 'text', text: ' ' },
      { kind: 'link', url: 'https://x.org', label: 'd' },
    ]);
  });
  it('leaves marks inside words and loose marks alone', () => {
    expect(parseInline('account_id and first_box, 2 * 3 * 4')).toEqual([
      { kind: 'text', text: 'account_id and first_box, 2 * 3 * 4' },
    ]);
  });
  it('never makes a script address something to press', () => {
    expect(parseInline('<javascript:alert(1)|here>')).toEqual([{ kind: 'text', text: '<javascript:alert(1)|here>' }]);
  });
  it('reads lists, quotes and code blocks', () => {
    expect(parseMrkdwn('one\n• a\n• b\n> q\n```x < y```').map((p) => p.kind)).toEqual([
      'lines',
      'list',
      'quote',
      'code',
    ]);
  });
  it('writes a date in the reader’s own zone', () => {
    const at = Date.UTC(2026, 2, 1, 23, 30) / 1000;
    expect(formatDate(at, '{date_short} {time}', 'Australia/Adelaide')).toBe('2 Mar 2026 10:00');
    expect(formatDate(at, '{date_short} {time}', 'America/New_York')).toBe('1 Mar 2026 18:30');
  });
});
