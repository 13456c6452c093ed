import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { type Bot, heard, imageOf, SAMPLE, startBot } from './support.ts';

const VERDICT = /^Churn has fallen|^Churn is|^Cannot say|^Too early/;

/** Every question around the verdict, as typed, and how its headline must begin. */
const QUESTIONS: readonly (readonly [string, RegExp])[] = [
  ['any early warning?', /^The early watch has raised an alarm: .*This is an early watch, not the verdict\./],
  ['early for a doubling', /^The early watch has raised an alarm: /],
  ['has churn moved, account by account?', /^Churn has fallen: about /],
  ['has churn moved on a smoothed chart?', /^Churn has fallen: about /],
  // The sample names no amounts.
  ['has revenue churn moved?', /^Cannot say whether revenue churn has moved: no column of the export holds amounts/],
  ['where does 14.2 % come from?', /^None of \d+ figures gives 14\.2 %; the nearest is |^14\.2 % is what /],
  ['where did churn move?', /^Churn has moved in all three groups of “plan”: /],
];

describe('the questions around the verdict, in the channel', () => {
  let bot: Bot;
  beforeAll(async () => {
    bot = await startBot({ mode: 'http' });
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }], { text: 'June export' });
    await heard(bot, post.ts, VERDICT);
  });
  afterAll(() => bot?.stop());

  it.each(QUESTIONS)('%s', async (text, headline) => {
    const asked = bot.service.as('tamsin').say('#retention', `@ebbline ${text}`);
    const reply = await heard(bot, asked.ts, headline);
    const words = JSON.stringify(reply.blocks);
    expect(words).toContain('I understood: ');
    expect(words).not.toMatch(/NaN|Infinity|undefined|\[object/);
    const image = imageOf(reply);
    expect(image?.alt_text.length).toBeGreaterThan(60);
  });
});
