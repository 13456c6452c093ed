// npm run bench: one question a benchmark, each answered as a ratio or a percentile in one run.
import { commandLineBench } from './commandLine.mjs';

const ms = (value) => `${Math.round(value)} ms`;

const line = commandLineBench();
console.log(`command line, ${line.rows.toLocaleString('en-US')} rows of CSV to JSON and PNG, whole process`);
console.log(`  ebb ${ms(line.ebbMs)}, bare engine ${ms(line.bareMs)}, ratio ${line.ratio.toFixed(2)} (worst ${line.worst.toFixed(2)}); wanted: at most 1.80`);
