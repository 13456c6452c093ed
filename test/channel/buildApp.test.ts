import { pino } from 'pino';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { Answers } from '../../src/answers/useCases.ts';
import { buildApp } from '../../src/channel/buildApp.ts';
import { type PracticeService, startPracticeService } from '../../src/practice/service.ts';
import type { Store } from '../../src/store/types.ts';

let service: PracticeService;
beforeAll(async () => {
  service = await startPracticeService({
    host: '127.0.0.1',
    signingSecret: 'a-signing-secret',
    botToken: 'xoxb-right',
    now: Date.now,
    random: Math.random,
  });
});
afterAll(() => service.close());

function appWith(botToken: string): { app: ReturnType<typeof buildApp>; working: () => boolean } {
  let working = false;
  const app = buildApp(
    {
      store: {
        work: async () => {
          working = true;
        },
      } as unknown as Store,
      answers: {} as Answers,
      log: pino({ level: 'silent' }),
      now: Date.now,
      random: Math.random,
      slack: { botToken, apiUrl: service.apiUrl },
      maxUploadBytes: 1000,
      practice: false,
    },
    { mode: 'http', signingSecret: 'a-signing-secret' },
  );
  return { app, working: () => working };
}

it('a refused token stops the start with what to do about it, and nothing is worked', async () => {
  const { app, working } = appWith('xoxb-wrong');
  await expect(app.init()).rejects.toMatchObject({
    code: 'SETTINGS_INVALID',
    message: expect.stringContaining('invalid_auth'),
  });
  expect(working()).toBe(false);
});

it('the right token starts the work', async () => {
  const { app, working } = appWith('xoxb-right');
  await app.init();
  expect(working()).toBe(true);
});
