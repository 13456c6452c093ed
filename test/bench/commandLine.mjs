// Question: how long does the command line take for 1,000,000 rows of CSV to JSON and PNG, whole process, against the bare engine?
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { writeExportRows } from './exportRows.mjs';

const here = (path) => fileURLToPath(new URL(path, import.meta.url));

function timed(args) {
  const begun = performance.now();
  const run = spawnSync(process.execPath, args, { encoding: 'utf8', maxBuffer: 64_000_000 });
  if (run.status !== 0) throw new Error(`${args.join(' ')} ended with ${run.status}: ${run.stderr}`);
  return { ms: performance.now() - begun, stdout: run.stdout };
}

const median = (values) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];

/** Runs both in turn, A B A B …, and compares pair by pair, so that a machine that slows down slows both. */
export function commandLineBench({ rows = 1_000_000, pairs = 7 } = {}) {
  const folder = mkdtempSync(join(tmpdir(), 'ebbline-bench-'));
  try {
    const file = join(folder, 'accounts.csv');
    writeExportRows(file, rows);
    const ours = [
      here('../../dist/cli/ebb.js'),
      'ask',
      file,
      '--tenure',
      '3 months',
      '--json',
      '--picture',
      join(folder, 'chart.png'),
    ];
    const answer = JSON.parse(timed(ours).stdout);
    const bare = [here('bareCensus.mjs'), file, String(answer.chart.subgroupSize)];
    const subgroups = Number.parseInt(timed(bare).stdout, 10);
    if (subgroups !== answer.chart.points.length)
      throw new Error(`the two disagree: ${subgroups} and ${answer.chart.points.length} subgroups`);
    const runs = Array.from({ length: pairs }, () => {
      const b = timed(bare).ms;
      const a = timed(ours).ms;
      return { a, b, ratio: a / b };
    });
    return {
      rows,
      ebbMs: median(runs.map((run) => run.a)),
      bareMs: median(runs.map((run) => run.b)),
      ratio: median(runs.map((run) => run.ratio)),
      worst: Math.max(...runs.map((run) => run.ratio)),
      timing: answer.timing,
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
