import type { Logger } from 'pino';
import type { Queue, QueueSettings, TakenJob } from './queue.ts';

export interface Worker {
  /** look for jobs now */
  wake(): void;
  /** says that the running jobs are still running, then takes back what dead processes left */
  confirm(): Promise<void>;
  /** takes no more jobs; waits for the running ones, and puts back those that take too long */
  stop(): Promise<void>;
}

/**
 * Works jobs from the queue, `concurrency` at a time: at once when woken, otherwise when polling finds one.
 * @param run works one job; what it throws fails the attempt
 * @param settled called after each job that ended and each look that found nothing more
 */
export function startWorker(options: {
  readonly queue: Queue;
  readonly settings: QueueSettings;
  readonly shared: boolean;
  readonly concurrency: number;
  readonly run: (job: TakenJob) => Promise<void>;
  readonly settled: () => void;
  readonly log?: Logger | undefined;
}): Worker {
  const { queue, settings, concurrency, run, settled, log } = options;
  const running = new Map<TakenJob, Promise<void>>();
  let looking: Promise<void> | undefined;
  let lookAgain = false;
  let stopped = false;

  const work = async (job: TakenJob): Promise<void> => {
    try {
      let failure: { readonly error: unknown } | undefined;
      try {
        await run(job);
      } catch (error) {
        failure = { error };
        log?.warn({ err: error, job: job.id, attempt: job.retryCount + 1 }, 'an entry could not be worked');
      }
      if (failure) await queue.fail(job.id, failure.error);
      else await queue.complete(job.id);
    } catch (error) {
      // The outcome could not be written down: the job expires, or is taken back on the next start, and is worked again.
      log?.error({ err: error, job: job.id }, 'the outcome of a job could not be recorded');
    }
  };

  const look = async (): Promise<void> => {
    do {
      lookAgain = false;
      while (!stopped && running.size < concurrency) {
        const jobs = await queue.take(concurrency - running.size);
        if (jobs.length === 0) break;
        for (const job of jobs) {
          const done = work(job).finally(() => {
            running.delete(job);
            settled();
            wake();
          });
          running.set(job, done);
        }
      }
    } while (lookAgain && !stopped);
  };

  const wake = (): void => {
    if (stopped) return;
    lookAgain = true;
    looking ??= look()
      .catch((error: unknown) => log?.error({ err: error }, 'the queue could not be read'))
      .finally(() => {
        looking = undefined;
        settled();
        // Woken between the last look and here.
        if (lookAgain) wake();
      });
  };

  let tending: Promise<void> | undefined;
  const confirm = (): Promise<void> => {
    tending ??= (async () => {
      if (running.size > 0) await queue.beat([...running.keys()]);
      if (options.shared) await queue.expire();
    })()
      .catch((error: unknown) => log?.warn({ err: error }, 'running jobs could not be confirmed'))
      .finally(() => {
        tending = undefined;
      });
    return tending;
  };

  const polling = setInterval(wake, settings.pollMs);
  const beating = setInterval(() => void confirm(), settings.beatMs);
  wake();

  return {
    wake,
    confirm,
    async stop() {
      stopped = true;
      clearInterval(polling);
      await looking;
      const waited = new Promise((resolve) => {
        setTimeout(resolve, settings.closeWaitMs).unref();
      });
      await Promise.race([Promise.all(running.values()), waited]);
      clearInterval(beating);
      await tending;
      if (running.size > 0) {
        log?.warn({ jobs: running.size }, 'jobs still running at the stop are put back for the next start');
        await queue.putBack([...running.keys()]);
      }
    },
  };
}
