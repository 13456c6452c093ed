import { readFileSync } from 'node:fs';
import { type FontWeight, fontFile } from './fonts.ts';

/** What is needed of a font to place text: how far each character moves the pen. */
interface Advances {
  readonly unitsPerEm: number;
  /** glyph of a code point; 0 when the font has none */
  readonly glyph: (codePoint: number) => number;
  readonly advance: (glyph: number) => number;
}

const loaded = new Map<FontWeight, Advances>();

/**
 * Width of one line of text in px, at a font size in px.
 * Sum of the advance widths, without kerning, which in this font only ever makes a line a little narrower (under 1 %): safe for layout.
 */
export function textWidth(text: string, sizePx: number, weight: FontWeight): number {
  const font = advances(weight);
  let units = 0;
  for (const character of text) units += font.advance(font.glyph(character.codePointAt(0) ?? 0));
  return (units / font.unitsPerEm) * sizePx;
}

/**
 * The text with every character our font cannot draw replaced, so that nothing becomes an empty box and no control character
 * reaches the SVG. White space becomes plain spaces; a stretch of undrawable characters becomes one question mark.
 */
export function drawable(text: string): string {
  const font = advances(400);
  let out = '';
  for (const character of text
    .normalize('NFC')
    .replace(/[\s\p{Cc}\p{Cf}]+/gu, (run) => (run === '\u00a0' ? run : ' '))) {
    if (font.glyph(character.codePointAt(0) ?? 0) !== 0) out += character;
    else if (!out.endsWith('?')) out += '?';
  }
  return holdTogether(out.trim());
}

const UNITS = [
  '%|days?|weeks?|months?|years?|points?|accounts?|customers?|January|February|March|April|May|June|July|August',
  'September|October|November|December',
].join('|');
const FIGURE_AND_UNIT = new RegExp(`(\\d) (${UNITS})(?![\\p{L}])`, 'gu');
const MONTH_AND_YEAR =
  /(January|February|March|April|May|June|July|August|September|October|November|December) (\d{4})/g;

/** A figure and its unit, or the parts of a date, never end up on two lines. */
function holdTogether(text: string): string {
  return text.replace(FIGURE_AND_UNIT, '$1\u00a0$2').replace(MONTH_AND_YEAR, '$1\u00a0$2');
}

function advances(weight: FontWeight): Advances {
  let font = loaded.get(weight);
  if (!font) {
    font = parse(readFileSync(fontFile(weight)));
    loaded.set(weight, font);
  }
  return font;
}

/** Reads the three tables with the widths. Source: OpenType specification, tables `head`, `hhea`, `hmtx`, `cmap` format 4. */
function parse(file: Buffer): Advances {
  const tables = new Map<string, number>();
  for (let i = 0; i < file.readUInt16BE(4); i++) {
    const record = 12 + 16 * i;
    tables.set(file.toString('latin1', record, record + 4), file.readUInt32BE(record + 8));
  }
  const table = (name: string): number => {
    const offset = tables.get(name);
    if (offset === undefined) throw new Error(`the font file has no ${name} table`);
    return offset;
  };
  const unitsPerEm = file.readUInt16BE(table('head') + 18);
  const longMetrics = file.readUInt16BE(table('hhea') + 34);
  const hmtx = table('hmtx');
  return {
    unitsPerEm,
    advance: (glyph) => file.readUInt16BE(hmtx + 4 * Math.min(glyph, longMetrics - 1)),
    glyph: characterMap(file, table('cmap')),
  };
}

function characterMap(file: Buffer, cmap: number): (codePoint: number) => number {
  let at = -1;
  for (let i = 0; i < file.readUInt16BE(cmap + 2); i++) {
    const offset = cmap + file.readUInt32BE(cmap + 4 + 8 * i + 4);
    if (file.readUInt16BE(offset) === 4) at = offset;
  }
  if (at < 0) throw new Error('the font file has no character map of format 4');
  const glyphs = new Map<number, number>();
  const segments = file.readUInt16BE(at + 6) / 2;
  const ends = at + 14;
  const starts = ends + 2 * segments + 2;
  const deltas = starts + 2 * segments;
  const ranges = deltas + 2 * segments;
  for (let i = 0; i < segments; i++) {
    const start = file.readUInt16BE(starts + 2 * i);
    const end = file.readUInt16BE(ends + 2 * i);
    const delta = file.readUInt16BE(deltas + 2 * i);
    const range = file.readUInt16BE(ranges + 2 * i);
    for (let code = start; code <= end && code !== 0xffff; code++) {
      if (range === 0) {
        glyphs.set(code, (code + delta) & 0xffff);
        continue;
      }
      const raw = file.readUInt16BE(ranges + 2 * i + range + 2 * (code - start));
      if (raw !== 0) glyphs.set(code, (raw + delta) & 0xffff);
    }
  }
  return (codePoint) => glyphs.get(codePoint) ?? 0;
}
