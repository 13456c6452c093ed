import sharp from 'sharp';
import { FONT_FAMILY } from './fonts.ts';
import { indexedPng } from './indexedPng.ts';

/** SVG to PNG at `density` pixels for one px of the drawing. */
export async function renderPng(svg: string, density: number): Promise<Uint8Array> {
  const drawn = sharp(Buffer.from(svg), { density: 72 * density })
    .ensureAlpha()
    .raw();
  const { data, info } = await drawn.toBuffer({ resolveWithObject: true });
  return indexedPng(data, info.width, info.height);
}

/**
 * Draws one letter in each weight, so that the fonts are found and opened before the first picture needs them. The work is done on a
 * thread of the image library's own and overlaps with loading the rest.
 */
export async function openFonts(): Promise<void> {
  const letters = [400, 700].map((weight) => `<text y="9" font-weight="${weight}">a</text>`).join('');
  const svg = `<svg xmlns="http://www.w3.org/2000/svg" width="9" height="9" font-family="${FONT_FAMILY}">${letters}</svg>`;
  await sharp(Buffer.from(svg)).raw().toBuffer();
}
