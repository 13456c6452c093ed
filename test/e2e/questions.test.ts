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
  ['plan', /^Count churn at 3 months, in points of 135 accounts/],
  ['what is an account worth?', /^An account that started since 1 February 2025 stays about 84 months/],
  ['is the target of 5 % met?', /^The target of 5 % is met, beyond chance: 3\.4 % are lost within 3 months/],
  ['spread', /^Nothing says that the points vary otherwise than by chance alone/],
  ['has churn moved by calendar month?', /^Cannot say whether churn has moved/],
  ['has churn moved by renewal date at 12 months?', /^(Churn|Cannot say|Too early)/],
  ['has churn moved with a g chart?', /^Churn has fallen: about /],
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
    expect(words).not.toMatch(/NaN|Infinity|undefined|\[object/);
    expect(words).toContain('I understood: ');
    const image = imageOf(reply);
    expect(image?.alt_text.length).toBeGreaterThan(60);
  });

  it('a bare “explain” is about the last verdict of its thread, else of the channel', async () => {
    const asked = bot.service.as('tamsin').say('#retention', '@ebbline has churn moved for Orchard?');
    await heard(bot, asked.ts, VERDICT);
    const plain = bot.service.as('wren').say('#retention', '@ebbline explain');
    const reply = await heard(bot, plain.ts, /^How this was reached, in \d+ steps/);
    expect(JSON.stringify(reply.blocks)).toContain('I understood: explain the verdict for “Orchard”');
    const other = bot.service.as('wren').say('#retention', '@ebbline has churn moved at 6 months?');
    await heard(bot, other.ts, VERDICT);
    bot.service.as('tamsin').say('#retention', '@ebbline explain', { threadTs: asked.ts });
    const inThread = await heard(bot, asked.ts, /^How this was reached, in \d+ steps/);
    expect(JSON.stringify(inThread.blocks)).toContain('I understood: explain the verdict for “Orchard”');
  });

  it('a newer export is compared with the one before it', async () => {
    const post = bot.service.as('wren').drop('#retention', [{ path: SAMPLE }], { text: 'the same again' });
    const read = await heard(bot, post.ts, 'Read: marrowby-recipe-cards.csv');
    expect(read.text).toContain('it says the same as marrowby-recipe-cards.csv, about all 8,005 accounts');
  });
});
