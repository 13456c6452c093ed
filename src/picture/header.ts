import type { PictureInput } from '../verdict/types.ts';
import { viewWords } from '../verdict/words/viewWords.ts';
import { capitalised, count, countOf, heldDate } from './figures.ts';
import { EMBER, INK, LEAD_SIZE, LEVEL, LINE, MARGIN, QUIET, TEXT_SIZE, TITLE_SIZE, WIDTH } from './palette.ts';
import type { PlacedText, Stroke } from './scene.ts';
import { drawable, textWidth } from './textWidth.ts';
import { titleAndRest, wouldSeeWords } from './title.ts';
import { valueScale } from './valueScale.ts';
import { wrapEvenly } from './wrapText.ts';

/** What is counted, in the order a reader asks: what, of whom, how many a point, up to when. */
export function countedLine(input: PictureInput): string {
  const parts = [capitalised(input.measure), input.subject];
  if (input.chart) {
    const { of } = valueScale(input.chart);
    if (of === 'gaps') parts.push('each point: one loss');
    const sizes = of === 'rates' ? input.chart.points.map((point) => point.accounts) : [];
    const smallest = Math.min(...sizes);
    const largest = Math.max(...sizes);
    const { one } = viewWords(input.view);
    if (sizes.length > 0 && smallest === largest) parts.push(`each point: ${countOf(smallest, one)}`);
    else if (sizes.length > 0) parts.push(`each point: ${count(smallest)} to ${countOf(largest, one)}`);
  }
  if (input.asOf !== null) parts.push(`data to ${heldDate(input.asOf)}`);
  return parts.filter((part) => part.trim() !== '').join(' · ');
}

/**
 * Title, headline, what is counted and, when churn moved, the level before and since with their marks.
 * @returns the texts, and `bottom`, the px below which the rest may begin
 */
export function header(input: PictureInput): {
  texts: PlacedText[];
  strokes: Stroke[];
  bottom: number;
} {
  const texts: PlacedText[] = [];
  const strokes: Stroke[] = [];
  const room = WIDTH - 2 * MARGIN;
  let y = MARGIN - 8;
  const block = (text: string, size: number, weight: 400 | 700, color: string, role: string): void => {
    for (const line of wrapEvenly(drawable(text), room, size, weight)) {
      y += size * LINE;
      texts.push({
        text: line,
        x: MARGIN,
        y: y - size * 0.2,
        size,
        weight,
        color,
        align: 'left',
        role,
      });
    }
  };
  const moved = input.verdict.outcome === 'risen' || input.verdict.outcome === 'fallen';
  const { title, rest } = titleAndRest(input);
  block(title, TITLE_SIZE, 700, moved ? EMBER : INK, 'title');
  y += 4;
  block(rest, LEAD_SIZE, 400, INK, 'headline');
  const wouldSee = wouldSeeWords(input);
  if (wouldSee !== '') {
    y += 4;
    block(wouldSee, TEXT_SIZE, 400, INK, 'headline');
  }
  y += 6;
  // A dot stays with what it follows, so that no line begins with one.
  block(countedLine(input).replaceAll(' · ', '\u00a0· '), TEXT_SIZE, 400, QUIET, 'counted');
  for (const [i, text] of texts.entries())
    if (text.role === 'counted') texts[i] = { ...text, text: text.text.replace(/\u00a0·$/, '') };
  const { before, after } = input.verdict;
  if (moved && before && after) {
    y += 12 + TEXT_SIZE * LINE;
    let x = MARGIN;
    for (const [word, level, color] of [
      ['before', before, LEVEL],
      ['since then about', after, EMBER],
    ] as const) {
      const text = `${word} ${valueScale(input.chart).levelWords(level)}`;
      const width = 40 + textWidth(text, TEXT_SIZE, 700);
      if (x > MARGIN && x + width > WIDTH - MARGIN) {
        x = MARGIN;
        y += TEXT_SIZE * LINE + 2;
      }
      strokes.push({ x, y: y - 11, x2: x + 30, y2: y - 11, color, width: 5 });
      texts.push({
        text,
        x: x + 40,
        y: y - 4,
        size: TEXT_SIZE,
        weight: 700,
        color,
        align: 'left',
        role: 'level',
      });
      x += width + 28;
    }
  }
  return { texts, strokes, bottom: y + 6 };
}
