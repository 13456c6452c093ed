#!/usr/bin/env node
import { runCli } from './runCli.ts';

process.exitCode = await runCli(process.argv.slice(2), {
  stdout: (text) => process.stdout.write(text),
  stderr: (text) => process.stderr.write(text),
  clock: () => performance.now(),
  progressWanted: process.stderr.isTTY === true,
});
