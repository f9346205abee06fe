import type { Logger } from 'pino';

/** Work that goes on after the answer was sent: mail whose outcome the caller must not learn from the time it takes. */
export interface BackgroundWork {
  run(what: string, work: () => Promise<void>): void;
  /** Resolves when everything started so far has ended: before the server stops, and in tests. */
  settled(): Promise<void>;
}

export function backgroundWork(log: Logger): BackgroundWork {
  const running = new Set<Promise<void>>();
  return {
    run(what, work) {
      const started = work()
        .catch((error: unknown) => log.error({ err: error, what }, 'work after the answer failed'))
        .finally(() => running.delete(started));
      running.add(started);
    },
    async settled() {
      while (running.size > 0) await Promise.all(running);
    },
  };
}
