import sharp from 'sharp';
import { describe, expect, test } from 'vitest';
import { compiledDrawing } from '../../src/picture/compiledDrawing.ts';
import { complainingLogger } from '../../src/picture/complainingLogger.ts';
import { layout } from '../../src/picture/layout.ts';
import { drawPicture, warmPicture } from '../../src/picture/picture.ts';
import { boxOf } from '../../src/picture/scene.ts';
import { DATA_SETS, PARAMETERS, SHAPE_SETS } from '../../src/picture/spec.ts';
import { renderSvg } from '../../src/picture/vectorDrawing.ts';
import { normalised } from './normalised.ts';
import { state } from './states.ts';

/** Names of the states whose drawing is kept as a file; accept a change one picture at a time, after looking at it. */
const KEPT = [
  'risen',
  'fallen',
  'steady',
  'watching',
  'passed',
  'too-early-none',
  'cannot-say',
  'counts',
  'unequal',
  'busy',
];

describe('drawPicture', () => {
  test.each(KEPT)('%s: draws as it did when somebody last looked at it', async (name) => {
    const { svg } = await drawPicture(state(name));
    await expect(normalised(svg)).toMatchFileSnapshot(`../pictures/${name}.svg`);
  });

  test.each(['risen', 'too-early-none', 'four-hundred', 'single', 'all-zero', 'all-one'])(
    '%s: the PNG decodes at its stated size, is small, and shows ink where every text should be',
    async (name) => {
      const input = state(name);
      const picture = await drawPicture(input);
      const { data, info } = await sharp(picture.png).removeAlpha().raw().toBuffer({ resolveWithObject: true });
      expect([info.width, info.height]).toEqual([picture.widthPx, picture.heightPx]);
      expect(info.width).toBe(1080);
      expect(picture.png.length).toBeLessThan(200_000);
      const scene = layout(input);
      const density = info.width / scene.widthPx;
      for (const text of scene.texts) {
        const box = boxOf(text);
        let darkest = 255;
        let lightest = 0;
        for (let y = Math.ceil(box.top * density); y < box.bottom * density; y++)
          for (let x = Math.ceil(box.left * density); x < box.right * density; x++) {
            const green = data[(y * info.width + x) * 3 + 1] ?? 0;
            darkest = Math.min(darkest, green);
            lightest = Math.max(lightest, green);
          }
        expect(lightest - darkest, text.text).toBeGreaterThan(90);
      }
    },
  );

  test('the palette changes no colour that an eye would miss', async () => {
    const picture = await drawPicture(state('risen'));
    const ours = await sharp(picture.png).removeAlpha().raw().toBuffer();
    const full = await sharp(Buffer.from(picture.svg), { density: 108 }).removeAlpha().raw().toBuffer();
    expect(ours.length).toBe(full.length);
    let sum = 0;
    let far = 0;
    for (let i = 0; i < full.length; i++) {
      const off = Math.abs((ours[i] ?? 0) - (full[i] ?? 0));
      sum += off;
      if (off > 24) far++;
    }
    expect(sum / full.length).toBeLessThan(1);
    expect(far / full.length).toBeLessThan(0.0002);
  });

  test('names with markup and characters the font lacks are drawn as text, not as markup', async () => {
    const { svg } = await drawPicture(state('early-move'));
    expect(svg).toContain('&lt;gardeners&gt;');
    expect(svg).not.toContain('<gardeners>');
  });

  test('the same input gives the same bytes, warmed or not', async () => {
    const first = await drawPicture(state('steady'));
    await warmPicture();
    const second = await drawPicture(state('steady'));
    expect(Buffer.from(second.png).equals(Buffer.from(first.png))).toBe(true);
  });

  test('it leaves its input as it was', async () => {
    const input = state('busy');
    const before = JSON.stringify(input);
    await drawPicture(input);
    expect(JSON.stringify(input)).toBe(before);
  });
});

describe('a drawing that Vega would warn about', () => {
  test('is an error when it is compiled', async () => {
    const { compile } = await import('vega-lite');
    const spec = {
      data: { values: [{ a: 1 }] },
      mark: 'bar',
      encoding: { x: { field: 'a', type: 'quantitative' }, nonsense: { field: 'a' } },
    };
    expect(() => compile(spec as never, { logger: complainingLogger() })).toThrow(/drawing the picture/);
  });

  test('is an error when it is drawn', async () => {
    const drawing = {
      width: 10,
      height: 10,
      data: [{ name: 'rows', values: [{ a: 1 }] }],
      marks: [{ type: 'rect', from: { data: 'rows' }, encode: { update: { x: { scale: 'missing', field: 'a' } } } }],
    };
    await expect(renderSvg(drawing as never)).rejects.toThrow(/drawing the picture/);
  });

  test('a scene goes into a compiled drawing that has a place for every part of it', () => {
    const drawing = compiledDrawing();
    expect(drawing.data?.map(({ name }) => name)).toEqual(expect.arrayContaining([...DATA_SETS, ...SHAPE_SETS]));
    expect(drawing.signals?.map(({ name }) => name)).toEqual(expect.arrayContaining([...PARAMETERS]));
    expect(drawing).toEqual(JSON.parse(JSON.stringify(drawing)));
  });
});
