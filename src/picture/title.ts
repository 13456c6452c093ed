import type { PictureInput } from '../verdict/types.ts';
import { capitalised } from './figures.ts';

/** The verdict in a few words. */
export function shortTitle(input: PictureInput): string {
  switch (input.verdict.outcome) {
    case 'risen':
      return 'Churn has risen';
    case 'fallen':
      return 'Churn has fallen';
    case 'steady':
      return input.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift')
        ? 'Steady so far, one to watch'
        : 'No sign that churn has moved';
    case 'too-early':
      return 'Too early to tell';
    case 'cannot-say':
      return 'These figures cannot tell';
  }
}

/** The headline without the words the title has just said. */
export function afterTitle(headline: string, title: string): string {
  const said = headline.replace(/^(yes|no|not really)[,:]\s*/i, '');
  if (!said.toLowerCase().startsWith(title.toLowerCase())) return headline;
  const rest = said.slice(title.length);
  return /^[:.,;]\s+\S/.test(rest) ? capitalised(rest.replace(/^[:.,;]\s+/, '')) : headline;
}
