import type { ReadReport } from '../accounts/types.ts';
import type { CensusPlan } from '../census/types.ts';
import { drawPicture } from '../picture/picture.ts';
import type { Reached } from './ask/types.ts';
import type { Answer } from './types.ts';

/** A verdict reached from accounts or from ready numbers. */
export type Unfinished = Omit<Reached, 'plan'> & { readonly plan: CensusPlan | null };

export interface Finishing {
  readonly picture: boolean;
  /** a clock in milliseconds, for the timing figures only */
  readonly clock: () => number;
  /** clock reading when the answer was begun */
  readonly begun: number;
  /** time spent on reading before that */
  readonly readMs: number;
  /** what was read; null for ready numbers */
  readonly report: ReadReport | null;
}

/** Draws the picture and adds up the times. */
export async function finishAnswer(
  unfinished: Unfinished,
  { picture, clock, begun, readMs, report }: Finishing,
): Promise<Answer> {
  const { verdict, chart, dates, signals, trust, judgement, census, plan, drawn, countedAt } = unfinished;
  const charted = clock();
  const draw = unfinished.draw ?? (() => drawPicture({ ...drawn, chart, dates, signals, verdict }));
  const drawing = picture ? await draw() : null;
  const done = clock();
  return {
    verdict,
    chart,
    dates,
    signals,
    trust,
    judgement,
    report,
    census,
    plan,
    tenure: plan?.tenure ?? null,
    picture: drawing,
    timing: {
      readMs,
      censusMs: countedAt - begun,
      chartMs: charted - countedAt,
      pictureMs: done - charted,
      totalMs: readMs + done - begun,
    },
  };
}
