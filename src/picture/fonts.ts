import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';

/** The family name inside the font files, as SVG names it. */
export const FONT_FAMILY = 'Atkinson Hyperlegible Next';

export type FontWeight = 400 | 700;

const FACES: Record<FontWeight, string> = {
  400: '400Regular/AtkinsonHyperlegibleNext_400Regular.ttf',
  700: '700Bold/AtkinsonHyperlegibleNext_700Bold.ttf',
};

const packageRoot = dirname(
  createRequire(import.meta.url).resolve('@expo-google-fonts/atkinson-hyperlegible-next/package.json'),
);

/** Where the TrueType file of a weight lies on this machine. */
export function fontFile(weight: FontWeight): string {
  return join(packageRoot, FACES[weight]);
}

let pointed = false;

/**
 * Points fontconfig at the two font files we ship and at nothing else, so that a machine with other fonts, or none, draws the same text.
 * Must run before sharp is first loaded: fontconfig reads its environment once. This is the one place outside settings that touches
 * the environment, because fontconfig takes its configuration no other way.
 */
export function useShippedFonts(): void {
  if (pointed) return;
  pointed = true;
  const folder = mkdtempSync(join(tmpdir(), 'ebbline-fonts-'));
  process.once('exit', () => rmSync(folder, { recursive: true, force: true }));
  const file = join(folder, 'fonts.conf');
  const folders = ([400, 700] as const).map((weight) => `  <dir>${escapeXml(dirname(fontFile(weight)))}</dir>`);
  writeFileSync(
    file,
    [
      '<?xml version="1.0"?>',
      '<!DOCTYPE fontconfig SYSTEM "fonts.dtd">',
      '<fontconfig>',
      ...folders,
      `  <cachedir>${escapeXml(join(folder, 'cache'))}</cachedir>`,
      '</fontconfig>',
      '',
    ].join('\n'),
  );
  process.env.FONTCONFIG_FILE = file;
}

function escapeXml(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;');
}
