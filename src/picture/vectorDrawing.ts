import { parse, type Spec, View } from 'vega';
import { compiledDrawing } from './compiledDrawing.ts';
import { complainingLogger } from './complainingLogger.ts';
import type { Scene } from './scene.ts';
import { DATA_SETS, type PARAMETERS } from './spec.ts';

let compiled: Spec | undefined;

/** A scene as SVG. */
export async function drawScene(scene: Scene): Promise<string> {
  compiled ??= compiledDrawing();
  return renderSvg(withScene(compiled, scene));
}

/** The compiled drawing with a scene's data, numbers and size in it. */
function withScene(drawing: Spec, scene: Scene): Spec {
  const { frame } = scene;
  const numbers: Record<(typeof PARAMETERS)[number], number> = {
    left: frame.left,
    right: frame.right,
    top: frame.top,
    bottom: frame.bottom,
    x0: frame.xDomain[0],
    x1: frame.xDomain[1],
    y0: frame.yDomain[0],
    y1: frame.yDomain[1],
    lineWidth: scene.line.width,
    lineOpacity: scene.line.opacity,
  };
  const isData = (name: string): name is (typeof DATA_SETS)[number] => (DATA_SETS as readonly string[]).includes(name);
  const isNumber = (name: string): name is keyof typeof numbers => Object.hasOwn(numbers, name);
  return {
    ...drawing,
    width: scene.widthPx,
    height: scene.heightPx,
    signals: (drawing.signals ?? []).map((signal) =>
      isNumber(signal.name) ? { name: signal.name, value: numbers[signal.name] } : signal,
    ),
    data: (drawing.data ?? []).map((data) => (isData(data.name) ? { ...data, values: [...scene[data.name]] } : data)),
  } as Spec;
}

/** Vega to SVG, without a screen or a canvas. Anything Vega warns about is an error here. */
export async function renderSvg(drawing: Spec): Promise<string> {
  const logger = complainingLogger();
  const view = new View(parse(drawing, {}, { logger } as never), { renderer: 'none', logger });
  try {
    return await view.toSVG();
  } finally {
    view.finalize();
  }
}
