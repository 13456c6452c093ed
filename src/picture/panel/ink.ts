import { TEXT_SIZE } from '../palette.ts';
import type { Area, PlacedMark, PlacedText, Polyline, Slab, Stroke } from '../scene.ts';
import { drawable } from '../textWidth.ts';

/*
 * What a part of a picture adds to the drawing, in px. Drawn from the bottom up in this order: slabs, areas, veils, under, polylines,
 * over, marks, texts.
 */
export interface Ink {
  readonly slabs?: readonly Slab[];
  readonly areas?: readonly Area[];
  readonly veils?: readonly Slab[];
  readonly under?: readonly Stroke[];
  readonly polylines?: readonly Polyline[];
  readonly over?: readonly Stroke[];
  readonly marks?: readonly PlacedMark[];
  readonly texts?: readonly PlacedText[];
}

/** Several parts as one; within a layer, later parts lie over earlier ones. */
export function ink(...parts: readonly Ink[]): Required<Ink> {
  return {
    slabs: parts.flatMap((part) => part.slabs ?? []),
    areas: parts.flatMap((part) => part.areas ?? []),
    veils: parts.flatMap((part) => part.veils ?? []),
    under: parts.flatMap((part) => part.under ?? []),
    polylines: parts.flatMap((part) => part.polylines ?? []),
    over: parts.flatMap((part) => part.over ?? []),
    marks: parts.flatMap((part) => part.marks ?? []),
    texts: parts.flatMap((part) => part.texts ?? []),
  };
}

/** A text in the drawing's smallest size, every character of it drawable. */
export function placed(
  text: string,
  x: number,
  y: number,
  look: Pick<PlacedText, 'color' | 'role'> & Partial<Pick<PlacedText, 'align' | 'weight' | 'size'>>,
): PlacedText {
  return { align: 'left', weight: 400, size: TEXT_SIZE, ...look, text: drawable(text), x, y };
}
