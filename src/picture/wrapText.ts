import type { FontWeight } from './fonts.ts';
import { textWidth } from './textWidth.ts';

/**
 * Breaks text at spaces into lines no wider than `widthPx`; a single word wider than that is broken inside.
 * No-break spaces hold: "6.2 %" stays together.
 * @returns at least one line
 */
export function wrapText(text: string, widthPx: number, sizePx: number, weight: FontWeight): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ').filter((part) => part !== '')) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (textWidth(longer, sizePx, weight) <= widthPx) {
      line = longer;
      continue;
    }
    if (line !== '') lines.push(line);
    line = word;
    while (textWidth(line, sizePx, weight) > widthPx && line.length > 1) {
      let keep = line.length - 1;
      while (keep > 1 && textWidth(line.slice(0, keep), sizePx, weight) > widthPx) keep--;
      lines.push(line.slice(0, keep));
      line = line.slice(keep);
    }
  }
  if (line !== '' || lines.length === 0) lines.push(line);
  return lines;
}

/** As wrapText, with the lines evened out: the narrowest width that needs no more lines. For short labels. */
export function balanceText(text: string, widthPx: number, sizePx: number, weight: FontWeight): string[] {
  const count = wrapText(text, widthPx, sizePx, weight).length;
  if (count === 1) return wrapText(text, widthPx, sizePx, weight);
  let narrow = widthPx / 2;
  let wide = widthPx;
  while (wide - narrow > 4) {
    const middle = (narrow + wide) / 2;
    if (wrapText(text, middle, sizePx, weight).length <= count) wide = middle;
    else narrow = middle;
  }
  return wrapText(text, wide, sizePx, weight);
}

/** As wrapText, but evened out when the last line would be a lone word or two. For running text. */
export function wrapEvenly(text: string, widthPx: number, sizePx: number, weight: FontWeight): string[] {
  const lines = wrapText(text, widthPx, sizePx, weight);
  const last = textWidth(lines.at(-1) ?? '', sizePx, weight);
  return lines.length > 1 && last < widthPx / 4 ? balanceText(text, widthPx, sizePx, weight) : lines;
}
