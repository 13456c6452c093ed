import { parse, type Spec, View } from 'vega';
import { compiledDrawing } from './compiledDrawing.ts';
import { complainingLogger } from './complainingLogger.ts';
import type { Scene } from './scene.ts';
import { DATA_SETS, type PARAMETERS, SHAPE_SETS } from './spec.ts';

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
  const shapes = shapeRows(scene);
  // Most drawings have no shapes of their own: their layers would only cost time.
  const empty: readonly string[] = SHAPE_SETS.filter((name) => shapes[name].length === 0);
  const isShape = (name: string): name is (typeof SHAPE_SETS)[number] => Object.hasOwn(shapes, name);
  const isData = (name: string): name is (typeof DATA_SETS)[number] => (DATA_SETS as readonly string[]).includes(name);
  const isNumber = (name: string): name is keyof typeof numbers => Object.hasOwn(numbers, name);
  return {
    ...drawing,
    width: scene.widthPx,
    height: scene.heightPx,
    signals: (drawing.signals ?? []).map((signal) =>
      isNumber(signal.name) ? { name: signal.name, value: numbers[signal.name] } : signal,
    ),
    data: (drawing.data ?? [])
      .filter((data) => !empty.includes(data.name))
      .map((data) => {
        if (isShape(data.name)) return { ...data, values: shapes[data.name] };
        return isData(data.name) ? { ...data, values: [...scene[data.name]] } : data;
      }),
    marks: (drawing.marks ?? []).filter((mark) => !empty.includes(facetOf(mark))),
  } as Spec;
}

/** One row for each place of a shape. */
function shapeRows(scene: Scene): Record<(typeof SHAPE_SETS)[number], object[]> {
  return {
    areas: (scene.areas ?? []).flatMap(({ edge, color, opacity = 1 }, shape) =>
      edge.map((place) => ({ ...place, color, opacity, shape })),
    ),
    polylines: (scene.polylines ?? []).flatMap(({ path, ...look }, shape) =>
      path.map((place) => ({ ...place, ...look, shape })),
    ),
  };
}

/** The data set whose shapes a group of marks draws; empty for other marks. */
function facetOf(mark: NonNullable<Spec['marks']>[number]): string {
  const from = mark.from as { readonly facet?: { readonly data?: string } } | undefined;
  return from?.facet?.data ?? '';
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
