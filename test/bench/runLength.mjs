// Question: how long does an exact run length of tests 1, 2, 5, 6 take, in a process that has never computed one and in one that has, and
// how does that compare with simulating it to one part in a hundred?
import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const once = fileURLToPath(new URL('runLengthOnce.mjs', import.meta.url));
const median = (values) => [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)];

export const RUN_LENGTH_DESIGNS = [
  [85, 0.06],
  [500, 0.05],
  [2_000, 0.1],
  [2_000, 0.5],
];

export function runLengthBench({ processes = 5 } = {}) {
  return RUN_LENGTH_DESIGNS.map(([size, rate]) => {
    const runs = Array.from({ length: processes }, () => {
      const run = spawnSync(process.execPath, [once, String(size), String(rate)], { encoding: 'utf8' });
      if (run.status !== 0) throw new Error(`${once} ended with ${run.status}: ${run.stderr}`);
      return JSON.parse(run.stdout);
    });
    const [{ mean, simulatedMean, standardError }] = runs;
    if (Math.abs(mean - simulatedMean) > 4 * standardError)
      throw new Error(`the two disagree at n = ${size}: ${mean} and ${simulatedMean}`);
    return {
      size,
      rate,
      mean,
      firstMs: median(runs.map((run) => run.firstMs)),
      worstMs: Math.max(...runs.map((run) => run.firstMs)),
      againMs: median(runs.map((run) => run.againMs)),
      ratio: median(runs.map((run) => run.simulatedMs / run.againMs)),
    };
  });
}
