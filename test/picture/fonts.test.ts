import { execFile } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { build } from 'vite';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { drawPicture } from '../../src/picture/picture.ts';
import { state } from './states.ts';

const run = promisify(execFile);
const root = fileURLToPath(new URL('../..', import.meta.url));
let folder = '';

/** Runs the bundled drawing code in a process of its own whose fontconfig knows no font at all. */
async function inFontlessProcess(program: string): Promise<string> {
  const file = join(folder, `program-${createHash('sha1').update(program).digest('hex').slice(0, 8)}.mjs`);
  writeFileSync(file, program);
  const { stdout } = await run(process.execPath, [file], {
    env: { HOME: folder, FONTCONFIG_FILE: join(folder, 'empty.conf'), TZ: 'UTC' },
  });
  return stdout.trim();
}

beforeAll(async () => {
  // Inside the project, so that the bundle finds its packages.
  mkdirSync(join(root, 'node_modules/.cache'), { recursive: true });
  folder = mkdtempSync(join(root, 'node_modules/.cache/ebbline-fontless-'));
  writeFileSync(join(folder, 'empty.conf'), '<?xml version="1.0"?><fontconfig></fontconfig>');
  writeFileSync(join(folder, 'input.json'), JSON.stringify(state('risen')));
  await build({
    configFile: false,
    root,
    logLevel: 'error',
    build: { ssr: join(root, 'src/picture/picture.ts'), outDir: folder, emptyOutDir: false, minify: false },
  });
});

afterAll(() => rmSync(folder, { recursive: true, force: true }));

const HASH = `const hash = (bytes) => createHash('sha256').update(bytes).digest('hex');`;
const HEAD = `import { createHash } from 'node:crypto'; import { readFileSync } from 'node:fs'; ${HASH}
const input = JSON.parse(readFileSync(new URL('./input.json', import.meta.url), 'utf8'));`;

describe('useShippedFonts', () => {
  test('a machine without any font draws the same picture, to the byte', async () => {
    const here = await drawPicture(state('risen'));
    const there = await inFontlessProcess(`${HEAD}
      const { drawPicture } = await import('./picture.js');
      console.log(hash((await drawPicture(input)).png));`);
    expect(there).toBe(createHash('sha256').update(here.png).digest('hex'));
  });

  test('control: without the shipped fonts, such a machine draws something else', async () => {
    const { svg } = await drawPicture(state('risen'));
    writeFileSync(join(folder, 'drawing.svg'), svg);
    const [bare, shipped] = await Promise.all([
      inFontlessProcess(`${HEAD}
        const sharp = (await import('sharp')).default;
        console.log(hash(await sharp(readFileSync(new URL('./drawing.svg', import.meta.url))).raw().toBuffer()));`),
      inFontlessProcess(`${HEAD}
        const { warmPicture } = await import('./picture.js');
        await warmPicture();
        const sharp = (await import('sharp')).default;
        console.log(hash(await sharp(readFileSync(new URL('./drawing.svg', import.meta.url))).raw().toBuffer()));`),
    ]);
    expect(bare).not.toBe(shipped);
  });
});
