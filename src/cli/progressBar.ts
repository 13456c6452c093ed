import { statSync } from 'node:fs';
import type { CliSurroundings } from './types.ts';

/** Reads of smaller files end before a bar could be read. */
const LONG_READ_BYTES = 20_000_000;

/** A bar on standard error for long reads, when somebody is watching. */
export async function progressBar(
  around: CliSurroundings,
  file: string,
): Promise<{ update: (fraction: number) => void; stop: () => void } | null> {
  if (!around.progressWanted || (statSync(file, { throwIfNoEntry: false })?.size ?? 0) < LONG_READ_BYTES) return null;
  const { SingleBar } = (await import('cli-progress')).default;
  const bar = new SingleBar({
    format: 'Reading {bar} {percentage} %',
    stream: process.stderr,
    hideCursor: true,
    clearOnComplete: true,
  });
  bar.start(100, 0);
  return {
    update: (fraction) => bar.update(Math.round(fraction * 100)),
    stop: () => bar.stop(),
  };
}
