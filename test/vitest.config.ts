import { defineConfig } from 'vitest/config';

export default defineConfig({
  test: {
    root: new URL('..', import.meta.url).pathname,
    include: ['test/**/*.test.ts'],
    // Two cores: more workers only make the ones with a real server or a browser wait for each other.
    maxWorkers: 2,
    testTimeout: 60_000,
    hookTimeout: 120_000,
    // The answer must not depend on where the machine stands; a zone with daylight saving finds out quickest.
    env: { TZ: 'America/St_Johns' },
  },
});
