/** Lets callers wait until nothing is left to do, woken by what happens instead of by a clock. */
export interface Settling {
  /** something ended, or there was nothing to take up */
  changed(): void;
  /** resolves when nothing is unfinished; rejects after `timeoutMs`, saying how much is */
  drained(timeoutMs: number): Promise<void>;
}

/**
 * @param unfinished how many things are still to be done, here or in any other process
 * @param pollMs how often to count anyway: what another process ends wakes nobody here
 */
export function settling(unfinished: () => Promise<number>, pollMs: number): Settling {
  const waiting = new Set<() => void>();
  return {
    changed() {
      for (const wake of waiting) wake();
    },
    async drained(timeoutMs) {
      let over = false;
      let changed = false;
      let resolveChange: (() => void) | undefined;
      const wake = () => {
        changed = true;
        resolveChange?.();
      };
      waiting.add(wake);
      const timeout = setTimeout(() => {
        over = true;
        wake();
      }, timeoutMs);
      const counting = setInterval(wake, pollMs);
      try {
        for (;;) {
          changed = false;
          const left = await unfinished();
          if (left === 0) return;
          if (over) throw new Error(`${left} received entries are still unfinished after ${timeoutMs} ms`);
          if (!changed) {
            await new Promise<void>((resolve) => {
              resolveChange = resolve;
            });
          }
        }
      } finally {
        clearTimeout(timeout);
        clearInterval(counting);
        waiting.delete(wake);
      }
    },
  };
}
