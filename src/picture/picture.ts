import type { PictureInput } from '../verdict/types.ts';
import { altText } from './altText.ts';
import { useShippedFonts } from './fonts.ts';
import { layout } from './layout.ts';
import { EMPTY_SCENE, type Scene } from './scene.ts';

export interface Picture {
  readonly png: Uint8Array;
  readonly svg: string;
  readonly altText: string;
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Pixels of the PNG for one px of the drawing: 1080 px across, three for each of the 360 points a phone shows it at. */
const DENSITY = 1.5;

interface Renderer {
  readonly drawScene: typeof import('./vectorDrawing.ts').drawScene;
  readonly renderPng: typeof import('./raster.ts').renderPng;
}

let renderer: Promise<Renderer> | undefined;

/** The libraries behind the picture take a third of a second to load; they are loaded once, when first needed or warmed. */
function loadRenderer(): Promise<Renderer> {
  renderer ??= (async () => {
    useShippedFonts();
    const { openFonts, renderPng } = await import('./raster.ts');
    const fontsOpen = openFonts();
    const { drawScene } = await import('./vectorDrawing.ts');
    await fontsOpen;
    return { drawScene, renderPng };
  })();
  return renderer;
}

/**
 * Loads everything the first picture needs and draws once with nothing in it, so that a caller can overlap it with other waiting.
 * Safe to call and not wait for: a failure shows when a picture is drawn.
 */
export async function warmPicture(): Promise<void> {
  try {
    const { drawScene } = await loadRenderer();
    await drawScene(EMPTY_SCENE);
  } catch {
    renderer = undefined;
  }
}

/**
 * Draws a verdict's picture.
 * @param input finished numbers: rates as fractions, days as day numbers; nothing is computed here but places
 * @returns the PNG, 1080 px wide, the SVG it was made from, and the text for those who cannot see it
 * @throws  Error when Vega warns: a warning would mean a part of the drawing is missing
 */
export async function drawPicture(input: PictureInput): Promise<Picture> {
  return drawPlate(layout(input), altText(input));
}

/**
 * Draws any other picture: one whose parts were placed with the kit in `panel/`.
 * @param altText  what it shows, for those who cannot see it
 * @throws  Error when Vega warns: a warning would mean a part of the drawing is missing
 */
export async function drawPlate(scene: Scene, altText: string): Promise<Picture> {
  const { renderPng, drawScene } = await loadRenderer();
  const svg = await drawScene(scene);
  const png = await renderPng(svg, DENSITY);
  return {
    png,
    svg,
    altText,
    widthPx: Math.round(scene.widthPx * DENSITY),
    heightPx: Math.round(scene.heightPx * DENSITY),
  };
}
