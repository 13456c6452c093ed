import { z } from 'zod';
import type { Signal, Verdict } from '../../verdict/types.ts';
import { ACTION } from '../names.ts';
import { type Button, bullets, button, type Message, message, section } from './blocks.ts';
import { inert, shortened } from './text.ts';

/** Lines shown before "More". */
const EVIDENCE_SHOWN = 6;
const CAUTIONS_SHOWN = 4;
/** Most lines shown of each kind: the whole list of passed flags of a long history would bury the answer. */
const MOST_LINES = 14;
const BUTTON_VALUE_LENGTH = 2000;

const restSchema = z.strictObject({ evidence: z.array(z.string()), cautions: z.array(z.string()) });

/** Lines kept behind "More"; not yet made safe to show. */
export type Rest = Readonly<z.infer<typeof restSchema>>;

type Lines = Readonly<Record<'evidence' | 'cautions' | 'next', readonly string[]>>;

export interface VerdictLines {
  readonly whole: Lines;
  readonly shown: Lines;
  /** null when all is shown */
  readonly rest: Rest | null;
}

/**
 * What of a verdict is shown at once and what is kept behind "More". The last caution, about what the figure may be used for, is always
 * shown. The rest travels in the button itself, so that it can be shown years later and after a restart; when it does not fit there, or
 * is a single line, all is shown.
 * @param signals the flags, by whose words their lines are known: the first flag tells enough, how far to trust it must not be pushed away
 */
export function verdictLines(
  { evidence, cautions, next }: Pick<Verdict, 'evidence' | 'cautions' | 'next'>,
  signals: readonly Pick<Signal, 'words'>[],
): VerdictLines {
  const whole = { evidence: limited(evidence), cautions: limited(cautions), next: limited(next) };
  const first = firstToShow(evidence, signals);
  const many = cautions.length > CAUTIONS_SHOWN;
  const rest: Rest = {
    evidence: evidence.filter((_, i) => !first.has(i)),
    cautions: many ? cautions.slice(CAUTIONS_SHOWN - 1, -1) : [],
  };
  const kept = rest.evidence.length + rest.cautions.length;
  if (kept < 2 || JSON.stringify(rest).length > BUTTON_VALUE_LENGTH) return { whole, shown: whole, rest: null };
  const particular = many ? [...cautions.slice(0, CAUTIONS_SHOWN - 1), ...cautions.slice(-1)] : cautions;
  const told = evidence.filter((_, i) => first.has(i));
  return { whole, shown: { ...whole, evidence: limited(told), cautions: limited(particular) }, rest };
}

/** Places of the lines of evidence to show first: everything but the flags after the first, then those. */
function firstToShow(evidence: readonly string[], signals: readonly Pick<Signal, 'words'>[]): ReadonlySet<number> {
  const isFlag = (line: string): boolean =>
    /\bfurther flags?\b/.test(line) || signals.some(({ words }) => line.toLowerCase().includes(words.toLowerCase()));
  const places = [...evidence.keys()];
  const flags = places.filter((i) => isFlag(evidence[i]!)).slice(1);
  const ordered = [...places.filter((i) => !flags.includes(i)), ...flags];
  return new Set(ordered.slice(0, EVIDENCE_SHOWN));
}

export function moreButton(rest: Rest): Button {
  return button('More', ACTION.more, JSON.stringify(rest));
}

/** What was kept behind "More", for whoever pressed it; undefined when the button carries something else. */
export function moreMessage(value: unknown): Message | undefined {
  const parsed = restSchema.safeParse(value);
  if (!parsed.success) return undefined;
  const evidence = bullets(limited(parsed.data.evidence));
  const cautions = bullets(limited(parsed.data.cautions));
  return message(
    [...evidence, ...cautions],
    [
      evidence.length > 0 && section(['*What it rests on, continued*', ...evidence]),
      cautions.length > 0 && section(['*Keep in mind, continued*', ...cautions]),
    ],
  );
}

function limited(lines: readonly string[]): string[] {
  const shown = lines.slice(0, MOST_LINES).map((line) => inert(shortened(line, 800)));
  return lines.length > shown.length ? [...shown, `… and ${lines.length - shown.length} more`] : shown;
}
