/*
 * The look: a tide gauge. Water is the band in which chance alone keeps the points; sand is the stretch the usual level was set from;
 * ember is what stands out of the usual water. Ember and the blues differ in lightness as well as hue, and every ember mark also has a
 * shape and words of its own, so nothing hangs on colour.
 */
export const PAPER = '#fbfaf6';
export const INK = '#16262e';
export const QUIET = '#4b5c64';
export const HAIRLINE = '#dfe3e1';
export const WATER_DEEP = '#9fcad3';
export const WATER_PALE = '#d8ebee';
export const WATER_EDGE = '#4f93a3';
export const LEVEL = '#0e5a6e';
export const SAND = '#efe6d2';
export const SAND_EDGE = '#c8b788';
export const SAND_INK = '#6b5524';
export const EMBER = '#b8410f';
export const EMBER_TINT = '#f3c9b1';
export const GHOST = '#6d7d85';

/** Sizes in px of the 720 px wide drawing; it is shown at half that width on a phone, so 20 px is the floor. */
export const WIDTH = 720;
export const MARGIN = 26;
export const TITLE_SIZE = 38;
export const LEAD_SIZE = 24;
export const TEXT_SIZE = 20;
export const LINE = 1.26;
