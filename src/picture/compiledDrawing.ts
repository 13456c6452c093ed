import type { Spec } from 'vega';
import { compile } from 'vega-lite';
import { complainingLogger } from './complainingLogger.ts';
import { drawingSpec } from './spec.ts';

/**
 * The drawing's Vega-Lite specification, compiled to Vega. The same for every scene, which is why the bundle of the command line carries
 * the result instead of the compiler (deploy/bundleCli.mjs).
 */
export function compiledDrawing(): Spec {
  return compile(drawingSpec(), { logger: complainingLogger() }).spec;
}
