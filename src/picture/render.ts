import sharp from 'sharp';
import { parse, View } from 'vega';
import { compile, type TopLevelSpec } from 'vega-lite';
import { indexedPng } from './indexedPng.ts';

/** Vega-Lite to SVG, without a screen or a canvas. Anything Vega warns about is an error here. */
export async function renderSvg(spec: TopLevelSpec): Promise<string> {
  const logger = complainingLogger();
  const compiled = compile(spec, { logger });
  const view = new View(parse(compiled.spec, {}, { logger } as never), {
    renderer: 'none',
    logger,
  });
  try {
    return await view.toSVG();
  } finally {
    view.finalize();
  }
}

/** SVG to PNG at `density` pixels for one px of the drawing. */
export async function renderPng(svg: string, density: number): Promise<Uint8Array> {
  const drawn = sharp(Buffer.from(svg), { density: 72 * density })
    .ensureAlpha()
    .raw();
  const { data, info } = await drawn.toBuffer({ resolveWithObject: true });
  return indexedPng(data, info.width, info.height);
}

function complainingLogger() {
  const complain = (...parts: readonly unknown[]): never => {
    throw new Error(`drawing the picture: ${parts.map(String).join(' ')}`);
  };
  const logger = {
    level: () => logger,
    error: complain,
    warn: complain,
    info: () => logger,
    debug: () => logger,
  };
  return logger as never;
}
