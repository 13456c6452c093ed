import { chartAndJudge } from '../verdict/chartAndJudge.ts';

/* What answers a question, apart from what reads a file: loaded while the engine reads, which needs none of it. */
export { answerQuestion } from '../answers/answerQuestion.ts';
export { sideCommand } from './sideCommand.ts';

/** Files from here on take the engine longer to read than the judge takes to get going. Our choice, no source. */
export const LONG_READ_BYTES = 20_000_000;

/** Judges a made-up chart, so that by the time the accounts are read the judge's code is compiled and quick. */
export function warmJudge(): void {
  chartAndJudge({ counts: Array.from({ length: 40 }, (_, i) => ({ accounts: 100, lost: 4 + ((i * 7) % 5) })) });
}
