// The whole study. vite (already a development dependency) loads the TypeScript; Node 20 cannot by itself.
// Usage: npm run study [-- EXPORTS [SEED]]        what fresh exports of each scenario are read as; 100 of each
//        npm run study -- trust [EXPORTS [SEED]]  whether the stated false-alarm interval and the stated detection are true; 500
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { runnerImport } from 'vite';

async function load(path) {
  const { module } = await runnerImport(fileURLToPath(new URL(path, import.meta.url)), {
    root: fileURLToPath(new URL('../..', import.meta.url)),
    configFile: false,
    logLevel: 'error',
  });
  return module;
}

async function scenarios(each, seed) {
  const { STUDY_SCENARIOS, runStudy, summarise } = await load('study.ts');
  console.log(`${each} fresh exports per scenario, seeds from ${seed}`);
  for (const scenario of STUDY_SCENARIOS) {
    const [row] = summarise(await runStudy(each, seed + STUDY_SCENARIOS.indexOf(scenario) * 1_000_000, [scenario]));
    const outcomes = Object.entries(row.outcomes)
      .map(([outcome, n]) => `${outcome} ${n}`)
      .join(', ');
    const dated = row.dated > 0 ? `; true start among the candidates in ${row.startInCandidates} of ${row.dated}` : '';
    console.log(`${scenario.padEnd(9)} ${outcomes}${dated}`);
  }
}

async function trust(exports, seed) {
  const { fromExports, runTrustStudy, summariseTrust, trustLines } = await load('trustStudy.ts');
  console.log(`${exports} fresh unchanged exports, each twice more, moved as its reply states; seeds from ${seed}`);
  const folder = await mkdtemp(join(tmpdir(), 'ebbline-study-'));
  try {
    const told = (done) => process.stderr.write(done % 25 === 0 ? `${done} done\n` : '');
    for (const line of trustLines(summariseTrust(await runTrustStudy(fromExports(folder), exports, seed, told))))
      console.log(line);
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

const args = process.argv.slice(2);
if (args[0] === 'trust') await trust(Number(args[1] ?? 500), Number(args[2] ?? 50_000));
else await scenarios(Number(args[0] ?? 100), Number(args[1] ?? 20_000));
