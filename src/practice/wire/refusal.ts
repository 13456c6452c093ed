/** Turning what zod found into the words and JSON pointers of the platform's own refusals. */
import type { z } from 'zod';

/** The service says no: becomes HTTP 200 with `{ok: false, error, …}`. Callers test `error`. */
export class Refusal extends Error {
  readonly error: string;
  readonly messages: readonly string[];
  readonly extra: Readonly<Record<string, unknown>>;

  constructor(error: string, messages: readonly string[] = [], extra: Readonly<Record<string, unknown>> = {}) {
    super(`${error}${messages.length > 0 ? `: ${messages.join('; ')}` : ''}`);
    this.name = 'Refusal';
    this.error = error;
    this.messages = messages;
    this.extra = extra;
  }
}

type Issue = z.core.$ZodIssue;

export function pointer(path: readonly PropertyKey[]): string {
  return path.map((step) => `/${String(step).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
}

function words(issue: Issue): { text: string; path: readonly PropertyKey[] } {
  const path = issue.path;
  switch (issue.code) {
    case 'too_big':
      return {
        path,
        text:
          issue.origin === 'array'
            ? `no more than ${issue.maximum} items allowed`
            : issue.origin === 'string'
              ? `must be less than ${Number(issue.maximum) + 1} characters`
              : `must be at most ${issue.maximum}`,
      };
    case 'too_small':
      return {
        path,
        text:
          issue.origin === 'array'
            ? `no fewer than ${issue.minimum} items allowed`
            : issue.origin === 'string'
              ? `must be more than ${Number(issue.minimum) - 1} characters`
              : `must be at least ${issue.minimum}`,
      };
    case 'invalid_type':
      if (issue.input === undefined && path.length > 0) {
        return { path: path.slice(0, -1), text: `missing required field: ${String(path.at(-1))}` };
      }
      return { path, text: `must provide a ${issue.expected}` };
    case 'unrecognized_keys':
      return { path, text: `invalid additional property: ${issue.keys.join(', ')}` };
    case 'invalid_union':
      return { path: path.at(-1) === 'type' ? path.slice(0, -1) : path, text: 'unsupported type' };
    case 'invalid_value':
      return { path, text: `must be one of: ${issue.values.map(String).join(', ')}` };
    default:
      return { path, text: issue.message };
  }
}

/**
 * One line for each issue, in the platform's form `[ERROR] … [json-pointer:/blocks/0/text]`.
 * @param root path under which the checked value sits in the request, such as ['blocks'] or ['view']
 */
export function issueMessages(issues: readonly Issue[], root: readonly PropertyKey[] = []): string[] {
  return issues.map((issue) => {
    const { text, path } = words(issue);
    return `[ERROR] ${text} [json-pointer:${pointer([...root, ...path])}]`;
  });
}
