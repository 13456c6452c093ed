import { parse, View } from 'vega';
import { compile, type TopLevelSpec } from 'vega-lite';

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
