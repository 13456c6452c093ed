import type { TopLevelSpec } from 'vega-lite';
import { FONT_FAMILY } from './fonts.ts';
import { INK, PAPER, WATER_DEEP, WATER_EDGE, WATER_PALE } from './palette.ts';
import type { Scene } from './scene.ts';

/**
 * The Vega-Lite specification of a scene. The view covers the whole drawing and both scales get their pixel ranges, so that Vega
 * places nothing by itself and never needs to know how wide a text is.
 */
export function spec(scene: Scene): TopLevelSpec {
  const { frame } = scene;
  const x = (field: string) => ({
    field,
    type: 'quantitative' as const,
    axis: null,
    scale: {
      domain: [...frame.xDomain],
      range: [frame.left, frame.right],
      nice: false,
      zero: false,
    },
  });
  const y = (field: string) => ({
    field,
    type: 'quantitative' as const,
    axis: null,
    scale: {
      domain: [...frame.yDomain],
      range: [frame.bottom, frame.top],
      nice: false,
      zero: false,
    },
  });
  const px = (field: string) => ({
    field,
    type: 'quantitative' as const,
    axis: null,
    scale: null,
  });
  const own = (field: string) => ({
    field,
    type: 'nominal' as const,
    scale: null,
    legend: null,
  });
  const each = (field: string) => ({ expr: `datum.${field}` });
  const water = (from: string, to: string) => ({
    gradient: 'linear' as const,
    x1: 0,
    y1: 0,
    x2: 0,
    y2: 1,
    stops: [
      { offset: 0, color: from },
      { offset: 1, color: to },
    ],
  });
  const strokes = (values: Scene['under']) => ({
    data: { values: [...values] },
    mark: {
      type: 'rule' as const,
      stroke: each('color'),
      strokeWidth: each('width'),
      strokeDash: { expr: 'datum.dash || []' },
      tooltip: null,
    },
    encoding: {
      x: px('x'),
      y: px('y'),
      x2: { field: 'x2' },
      y2: { field: 'y2' },
    },
  });
  const marks = {
    shape: each('shape'),
    size: each('area'),
    fill: each('fill'),
    stroke: each('stroke'),
    strokeWidth: each('strokeWidth'),
    opacity: 1,
  };
  const band = { values: [...scene.band] };
  return {
    $schema: 'https://vega.github.io/schema/vega-lite/v6.json',
    width: scene.widthPx,
    height: scene.heightPx,
    padding: 0,
    autosize: { type: 'none' },
    background: PAPER,
    config: { view: { stroke: null }, font: FONT_FAMILY, aria: false },
    resolve: { scale: { x: 'shared', y: 'shared' } },
    layer: [
      {
        data: { values: [...scene.slabs] },
        mark: { type: 'rect', fill: each('color') },
        encoding: {
          x: px('x'),
          y: px('y'),
          x2: { field: 'x2' },
          y2: { field: 'y2' },
        },
      },
      {
        data: band,
        mark: {
          type: 'area',
          color: water(WATER_PALE, WATER_DEEP),
          opacity: 0.86,
        },
        encoding: { x: x('x'), y: y('upper'), y2: { field: 'center' } },
      },
      {
        data: band,
        mark: {
          type: 'area',
          color: water(WATER_DEEP, WATER_PALE),
          opacity: 0.86,
        },
        encoding: { x: x('x'), y: y('center'), y2: { field: 'lower' } },
      },
      {
        data: { values: [...scene.veils] },
        mark: { type: 'rect', fill: each('color'), opacity: 0.55 },
        encoding: {
          x: px('x'),
          y: px('y'),
          x2: { field: 'x2' },
          y2: { field: 'y2' },
        },
      },
      strokes(scene.under),
      ...(['upper', 'lower'] as const).map((edge) => ({
        data: band,
        mark: { type: 'line' as const, stroke: WATER_EDGE, strokeWidth: 1.8 },
        encoding: { x: x('x'), y: y(edge) },
      })),
      {
        data: { values: [...scene.points] },
        mark: {
          type: 'line',
          stroke: INK,
          strokeWidth: scene.line.width,
          opacity: scene.line.opacity,
          strokeJoin: 'round',
        },
        encoding: { x: x('x'), y: y('value') },
      },
      {
        data: { values: [...scene.levels] },
        mark: {
          type: 'rule',
          stroke: each('color'),
          strokeWidth: each('width'),
          strokeDash: each('dash'),
        },
        encoding: { x: x('x'), x2: { field: 'x2' }, y: y('value') },
      },
      strokes(scene.over),
      {
        data: { values: [...scene.points] },
        mark: { type: 'point', ...marks },
        encoding: { x: x('x'), y: y('value') },
      },
      {
        data: { values: [...scene.marks] },
        mark: { type: 'point', ...marks },
        encoding: { x: px('x'), y: px('y') },
      },
      {
        data: { values: [...scene.texts] },
        mark: {
          type: 'text',
          baseline: 'alphabetic',
          align: each('align'),
          fontSize: each('size'),
          fontWeight: each('weight'),
          fill: each('color'),
        },
        encoding: { x: px('x'), y: px('y'), text: own('text') },
      },
    ],
  } as TopLevelSpec;
}
