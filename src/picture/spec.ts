import type { TopLevelSpec } from 'vega-lite';
import { FONT_FAMILY } from './fonts.ts';
import { INK, PAPER, WATER_DEEP, WATER_EDGE, WATER_PALE } from './palette.ts';

/** The parts of a scene that are lists of things to draw: the specification's data sets, by name. */
export const DATA_SETS = ['slabs', 'band', 'veils', 'under', 'points', 'levels', 'over', 'marks', 'texts'] as const;

/** Shapes of several places each: one row a place, told apart by `shape`. A scene without them is drawn without their layers. */
export const SHAPE_SETS = ['areas', 'polylines'] as const;

/** The single numbers of a scene: the specification's parameters. */
export const PARAMETERS = [
  'left',
  'right',
  'top',
  'bottom',
  'x0',
  'x1',
  'y0',
  'y1',
  'lineWidth',
  'lineOpacity',
] as const;

/**
 * The Vega-Lite specification of every drawing. A scene comes in only as data and parameters, so that it need be compiled once. The view
 * covers the whole drawing and both scales get their pixel ranges, so that Vega places nothing by itself and never needs to know how wide
 * a text is.
 */
export function drawingSpec(): TopLevelSpec {
  const named = (name: (typeof DATA_SETS)[number] | (typeof SHAPE_SETS)[number]) => ({ name });
  const value = (name: (typeof PARAMETERS)[number]) => ({ expr: name });
  const x = (field: string) => ({
    field,
    type: 'quantitative' as const,
    axis: null,
    scale: {
      domain: [value('x0'), value('x1')],
      range: [value('left'), value('right')],
      nice: false,
      zero: false,
    },
  });
  const y = (field: string) => ({
    field,
    type: 'quantitative' as const,
    axis: null,
    scale: {
      domain: [value('y0'), value('y1')],
      range: [value('bottom'), value('top')],
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
  const strokes = (name: 'under' | 'over') => ({
    data: named(name),
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
  const band = named('band');
  return {
    $schema: 'https://vega.github.io/schema/vega-lite/v6.json',
    params: PARAMETERS.map((name) => ({ name, value: 0 })),
    // The size is the scene's as well; it is put in when a scene is drawn.
    width: 1,
    height: 1,
    padding: 0,
    autosize: { type: 'none' },
    background: PAPER,
    config: { view: { stroke: null }, font: FONT_FAMILY, aria: false },
    resolve: { scale: { x: 'shared', y: 'shared' } },
    layer: [
      {
        data: named('slabs'),
        mark: { type: 'rect', fill: each('color') },
        encoding: {
          x: px('x'),
          y: px('y'),
          x2: { field: 'x2' },
          y2: { field: 'y2' },
        },
      },
      {
        data: named('areas'),
        mark: { type: 'area', fill: each('color'), opacity: each('opacity') },
        encoding: { x: px('x'), y: px('y'), y2: { field: 'y2' }, detail: own('shape'), order: { value: null } },
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
        data: named('veils'),
        mark: { type: 'rect', fill: each('color'), opacity: 0.55 },
        encoding: {
          x: px('x'),
          y: px('y'),
          x2: { field: 'x2' },
          y2: { field: 'y2' },
        },
      },
      strokes('under'),
      ...(['upper', 'lower'] as const).map((edge) => ({
        data: band,
        mark: { type: 'line' as const, stroke: WATER_EDGE, strokeWidth: 1.8 },
        encoding: { x: x('x'), y: y(edge) },
      })),
      {
        data: named('points'),
        mark: {
          type: 'line',
          stroke: INK,
          strokeWidth: value('lineWidth'),
          opacity: value('lineOpacity'),
          strokeJoin: 'round',
        },
        encoding: { x: x('x'), y: y('value') },
      },
      {
        data: named('levels'),
        mark: {
          type: 'rule',
          stroke: each('color'),
          strokeWidth: each('width'),
          strokeDash: each('dash'),
        },
        encoding: { x: x('x'), x2: { field: 'x2' }, y: y('value') },
      },
      {
        data: named('polylines'),
        mark: {
          type: 'line',
          stroke: each('color'),
          strokeWidth: each('width'),
          strokeDash: { expr: 'datum.dash || []' },
          strokeJoin: 'round',
        },
        encoding: { x: px('x'), y: px('y'), detail: own('shape'), order: { value: null } },
      },
      strokes('over'),
      {
        data: named('points'),
        mark: { type: 'point', ...marks },
        encoding: { x: x('x'), y: y('value') },
      },
      {
        data: named('marks'),
        mark: { type: 'point', ...marks },
        encoding: { x: px('x'), y: px('y') },
      },
      {
        data: named('texts'),
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
