import type { Census } from '../../census/types.ts';
import { dayInWords } from '../../days.ts';
import type { SideKind } from '../../requests/types.ts';
import { capitalised, count, counted } from '../../verdict/words/format.ts';
import type { Reply } from './types.ts';

/** The answer to a question about points where there is not one full point yet. */
export function noPoints(
  kind: SideKind,
  what: string,
  { census, tenure, whose }: { readonly census: Census; readonly tenure: string; readonly whose: string },
): Reply {
  const { matured, immature, nextPointOn, request } = census;
  const due = nextPointOn === null ? '' : `, about ${dayInWords(nextPointOn)}`;
  return {
    kind,
    headline: `Too early to say ${what}${whose}: ${matured === 0 ? 'no account has' : `only ${counted(matured, 'account')} ${matured === 1 ? 'has' : 'have'}`} had ${tenure} to leave or stay, and one point takes ${count(request.subgroupSize)}.`,
    evidence:
      immature > 0
        ? [
            `${capitalised(counted(immature, 'account'))} ${immature === 1 ? 'is' : 'are'} still too young to be counted.`,
          ]
        : [],
    cautions: [],
    next: [`Ask again when the first point is full${due}, or ask with fewer accounts a point or at a younger age.`],
    figures: { outcome: 'too-early', matured, subgroupSize: request.subgroupSize },
    picture: null,
  };
}
