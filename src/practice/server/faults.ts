/** Trouble on request: what a test asks the API to do wrong the next time a method is called. */
export type Fault =
  | { readonly kind: 'rate-limited'; readonly retryAfterSeconds: number }
  /** HTTP 500 before anything is done */
  | { readonly kind: 'server-error' }
  /** the call is carried out, then the connection drops before the answer: the caller cannot know */
  | { readonly kind: 'dropped-after' }
  /** HTTP 200 with a page instead of JSON */
  | { readonly kind: 'html' }
  /** an error of the caller's choosing */
  | { readonly kind: 'refused'; readonly error: string };

export class FaultPlan {
  readonly #queues = new Map<string, Fault[]>();

  add(method: string, fault: Fault, times = 1): void {
    const queue = this.#queues.get(method) ?? [];
    for (let i = 0; i < times; i++) queue.push(fault);
    this.#queues.set(method, queue);
  }

  take(method: string): Fault | undefined {
    return this.#queues.get(method)?.shift();
  }
}
