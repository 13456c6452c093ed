// The whole study: 100 fresh exports per scenario through the whole program. Usage: npm run study [-- EXPORTS [SEED]]
// vite (already a development dependency) loads the TypeScript; Node 20 cannot by itself.
import { fileURLToPath } from 'node:url';
import { runnerImport } from 'vite';

const { module } = await runnerImport(fileURLToPath(new URL('study.ts', import.meta.url)), {
  root: fileURLToPath(new URL('../..', import.meta.url)),
  configFile: false,
  logLevel: 'error',
});
const each = Number(process.argv[2] ?? 100);
const seed = Number(process.argv[3] ?? 20_000);
console.log(`${each} fresh exports per scenario, seeds from ${seed}`);
for (const scenario of module.STUDY_SCENARIOS) {
  const [row] = module.summarise(
    await module.runStudy(each, seed + module.STUDY_SCENARIOS.indexOf(scenario) * 1_000_000, [scenario]),
  );
  const outcomes = Object.entries(row.outcomes)
    .map(([outcome, n]) => `${outcome} ${n}`)
    .join(', ');
  const dated = row.dated > 0 ? `; true start among the candidates in ${row.startInCandidates} of ${row.dated}` : '';
  console.log(`${scenario.padEnd(9)} ${outcomes}${dated}`);
}
