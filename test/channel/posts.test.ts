import { describe, expect, it } from 'vitest';
import { worthReading } from '../../src/channel/download/worthReading.ts';
import { workOf } from '../../src/channel/inbox.ts';
import { inOrder } from '../../src/channel/jobs/inOrder.ts';
import { entriesOf } from '../../src/channel/listeners/posts.ts';
import { plainWords } from '../../src/channel/plainWords.ts';

const BOT = 'U0EBBLINE01';
const envelope = { event_id: 'Ev1', team_id: 'T1' };
const post = { channel: 'C1', ts: '10.1', user: 'U1', text: `<@${BOT}> has churn moved?` };
const of = (event: object, mention = false) => entriesOf(event, envelope, BOT, mention);

describe('what a post asks to be done', () => {
  it('a mention is one question, in the thread it stands in', () => {
    expect(of(post, true)).toMatchObject([
      { kind: 'ask', naturalKey: 'ask|C1|10.1', payload: { threadTs: '10.1', text: 'has churn moved?' } },
    ]);
    expect(of({ ...post, thread_ts: '9.9' }, true)).toMatchObject([{ payload: { threadTs: '9.9' } }]);
  });

  it('the message that holds the mention asks nothing twice, and talk among people asks nothing', () => {
    expect(of(post)).toEqual([]);
    expect(of({ ...post, text: 'has churn moved?' })).toEqual([]);
  });

  it('message and mention of one post with files name the same files', () => {
    const files = { ...post, subtype: 'file_share', files: [{ id: 'F1' }, { id: 'F2' }] };
    const keys = (entries: { naturalKey: string }[]) => entries.map((entry) => entry.naturalKey);
    expect(keys(of(files))).toEqual(['file|C1|F1|10.1', 'file|C1|F2|10.1']);
    expect(keys(of(files, true))).toEqual(keys(of(files)));
    expect(of(files)).toMatchObject([{ payload: { mentioned: true, question: 'has churn moved?', alone: false } }, {}]);
    expect(of({ ...files, text: 'June' })).toMatchObject([{ payload: { mentioned: false, question: '' } }, {}]);
  });

  it('what is said to it alone is a question', () => {
    expect(of({ ...post, text: 'has churn moved?', channel_type: 'im' })).toMatchObject([{ kind: 'ask' }]);
  });

  it.each([
    ['its own message', { user: BOT }],
    ['another bot’s message', { bot_id: 'B2' }],
    ['an edit', { subtype: 'message_changed' }],
    ['a join', { subtype: 'channel_join' }],
    ['something without a user', { user: undefined }],
  ])('%s asks nothing', (_what, change) => {
    expect(of({ ...post, channel_type: 'im', files: [{ id: 'F1' }], ...change })).toEqual([]);
  });

  it('what goes into the inbox comes out of it again, and nothing else does', () => {
    for (const entry of of(post, true)) expect(workOf(entry)).toMatchObject({ kind: 'ask', payload: entry.payload });
    expect(() => workOf({ kind: 'ask', payload: { channel: 'C1' } })).toThrow();
    expect(() => workOf({ kind: 'another', payload: {} })).toThrow();
  });
});

it('plain words: mentions go, labels stay, entities are read', () => {
  expect(
    plainWords(`<@${BOT}> *has* churn moved in <#C1|retention>, see <https://x.example|this> &lt;3 &amp;amp;`),
  ).toBe('has churn moved in retention , see this <3 &amp;');
});

describe('which files of a channel may be exports', () => {
  it.each([
    ['a.csv', 'text/csv', 'csv', true],
    ['a.CSV', '', '', true],
    ['a.txt', 'text/plain', 'text', true],
    ['pasted', 'text/plain', 'text', true],
    ['no-ending', 'application/octet-stream', 'binary', true],
    ['a.xlsx', 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet', 'xlsx', true],
    ['a.png', 'image/png', 'png', false],
    ['a.pdf', 'application/pdf', 'pdf', false],
    ['a.py', 'text/plain', 'python', false],
    ['a.zip', 'application/zip', 'zip', false],
    ['a.mp4', 'video/mp4', 'mp4', false],
  ])('%s (%s, %s): %s', (name, mimetype, filetype, wanted) => {
    expect(worthReading({ id: 'F1', name, mimetype, filetype })).toBe(wanted);
  });
});

it('work of one channel is done one after the other, that of another beside it, and a failure holds nobody up', async () => {
  const ordered = inOrder();
  const done: string[] = [];
  let open = (): void => undefined;
  const gate = new Promise<void>((resolve) => {
    open = resolve;
  });
  const first = ordered('a', async () => {
    await gate;
    done.push('a1');
    throw new Error('no');
  });
  const second = ordered('a', async () => void done.push('a2'));
  await ordered('b', async () => void done.push('b1'));
  expect(done).toEqual(['b1']);
  open();
  await expect(first).rejects.toThrow('no');
  await second;
  expect(done).toEqual(['b1', 'a1', 'a2']);
});
