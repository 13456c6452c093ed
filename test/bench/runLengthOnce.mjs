// One fresh process: the first exact run length, with the chain still to be built and nothing compiled, then more of them. Prints JSON.
// Usage: node runLengthOnce.mjs SIZE RATE
import { exactRunLength } from '../../dist/charts/runLength/exactRunLength.js';
import { simulatedRunLength } from '../../dist/charts/runLength/simulatedRunLength.js';
import { countZones } from '../../dist/charts/runLength/zoneChances.js';

const [size, rate] = process.argv.slice(2).map(Number);
const limits = { center: rate, rate, sigmaZ: 1, correlation: 0 };
const tests = [1, 2, 5, 6];

/** Processor time, so that others on the machine do not count; the compiler's own threads do. */
function timed(work) {
  const begun = process.cpuUsage();
  const result = work();
  const { user, system } = process.cpuUsage(begun);
  return { ms: (user + system) / 1_000, result };
}

const exact = () => exactRunLength(countZones({ ...limits, size }), tests);
const first = timed(exact);
const again = timed(() => Array.from({ length: 100 }, exact)).ms / 100;
// As many runs as bring the standard error of the mean to about 1 %.
const simulated = timed(() =>
  simulatedRunLength([size], limits, tests, { mostRuns: 10_000, pointBudget: Number.POSITIVE_INFINITY }),
);
process.stdout.write(
  JSON.stringify({
    firstMs: first.ms,
    againMs: again,
    simulatedMs: simulated.ms,
    mean: first.result.mean,
    simulatedMean: simulated.result.mean,
    standardError: simulated.result.standardError,
  }),
);
