import { asked } from './asked.ts';
import { first } from './first.ts';
import { follows } from './follows.ts';
import type { Migration } from './types.ts';

/** All steps in order. Append only. */
export const MIGRATIONS: readonly Migration[] = [first, asked, follows];
