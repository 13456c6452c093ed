import type { Answer } from '../answers/types.ts';
import type { Verdict } from '../verdict/types.ts';
import { readText } from '../verdict/words/readText.ts';

/** The verdict as text, as the channel would get it. */
export function answerText(answer: Answer, name: string, understood: readonly string[] = []): string {
  const blocks: string[][] = [];
  if (understood.length > 0) blocks.push([...understood]);
  if (answer.report) blocks.push(readText(answer.report, name));
  blocks.push(...wordBlocks(answer.verdict));
  return `${blocks.map((lines) => lines.join('\n')).join('\n\n')}\n`;
}

/** Headline, what it rests on, what to keep in mind and what next, as blocks of lines. */
export function wordBlocks(verdict: Pick<Verdict, 'headline' | 'evidence' | 'cautions' | 'next'>): string[][] {
  const listed = (title: string, lines: readonly string[]): string[] =>
    lines.length === 0 ? [] : [title, ...lines.map((line) => `  - ${line}`)];
  return [
    [verdict.headline],
    listed('What it rests on', verdict.evidence),
    listed('Keep in mind', verdict.cautions),
    listed('What next', verdict.next),
  ].filter((lines) => lines.length > 0);
}
