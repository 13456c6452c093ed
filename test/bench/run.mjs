// npm run bench: one question a benchmark, each answered as a ratio or a percentile in one run. Needs npm run build first.
import { fileURLToPath } from 'node:url';
import { createServer } from 'vite';
import { commandLineBench } from './commandLine.mjs';
import { runLengthBench } from './runLength.mjs';

const ms = (value) => `${Math.round(value)} ms`;

/** Loads TypeScript and keeps the loader open: what is measured loads parts of its own while it runs. */
async function withModule(path, use) {
  const loader = await createServer({
    root: fileURLToPath(new URL('../..', import.meta.url)),
    configFile: false,
    logLevel: 'error',
    appType: 'custom',
    server: { middlewareMode: true, hmr: false, watch: null, ws: false },
  });
  try {
    return await use(await loader.ssrLoadModule(fileURLToPath(new URL(path, import.meta.url))));
  } finally {
    await loader.close();
  }
}

const only = process.argv[2];

if (only === undefined || only === 'cli') {
  const line = commandLineBench();
  console.log(`command line, ${line.rows.toLocaleString('en-US')} rows of CSV to JSON and PNG, whole process`);
  console.log(
    `  ebb ${ms(line.ebbMs)}, bare engine ${ms(line.bareMs)}, ratio ${line.ratio.toFixed(2)} (worst ${line.worst.toFixed(2)}); wanted: at most 1.80`,
  );
}

if (only === undefined || only === 'bot') {
  const bot = await withModule('runningBot.ts', (module) => module.runningBotBench());
  console.log(
    `running bot, question to posted verdict with picture, ${bot.accounts.toLocaleString('en-US')} stored accounts`,
  );
  console.log(
    `  ${bot.asks} questions: median ${ms(bot.p50)}, 95th percentile ${ms(bot.p95)}, worst ${ms(bot.worst)}; wanted: 95th percentile under 1000 ms`,
  );
}

if (only === undefined || only === 'questions') {
  const sizes = [100_000, 1_000_000];
  const times = await withModule('everyQuestion.ts', (module) => module.everyQuestionBench(sizes));
  console.log(
    `every kind of chart and question with its picture, on ${sizes.map((n) => n.toLocaleString('en-US')).join(' and ')} accounts already read`,
  );
  for (const {
    name,
    ms: [small, large],
  } of times)
    console.log(
      `  ${name.padEnd(18)} ${ms(small).padStart(9)} ${ms(large).padStart(9)}   ten times the accounts take ${(large / small).toFixed(1)} times as long`,
    );
}

if (only === undefined || only === 'run-length') {
  console.log(
    'exact run length of tests 1, 2, 5, 6, processor time: first in a fresh process, again, and against simulating it to 1 %',
  );
  for (const { size, rate, mean, firstMs, worstMs, againMs, ratio } of runLengthBench())
    console.log(
      `  n = ${String(size).padEnd(5)} p = ${String(rate).padEnd(5)} mean ${mean.toFixed(2).padStart(7)}: first ${ms(firstMs)} (worst ${ms(worstMs)}; wanted: under 150 ms), again ${againMs.toFixed(2)} ms, simulation ${Math.round(ratio)} times as long`,
    );
}
