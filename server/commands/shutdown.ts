/** What was started, to be stopped in the other order: what came last, first. */
export interface Shutdown {
  add(stop: () => Promise<void> | void): void;
  /** Stops everything once, whoever asks and however often. */
  run(): Promise<void>;
  hasBegun(): boolean;
}

/**
 * Runs at the first of SIGINT, SIGTERM and SIGHUP and then ends this process. A terminal's Ctrl-C arrives twice under npm,
 * which passes it on, so further signals are ignored while things stop.
 */
export function shutdownOnSignals(): Shutdown {
  const stops: (() => Promise<void> | void)[] = [];
  let running: Promise<void> | null = null;
  const stopAll = async () => {
    for (const stop of stops.splice(0).reverse()) await stop();
  };
  const run = () => {
    running ??= stopAll();
    return running;
  };
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
    process.on(signal, () => {
      if (running) return;
      run().then(
        () => process.exit(0),
        (error: unknown) => {
          console.error(error);
          process.exit(1);
        },
      );
    });
  }
  return { add: (stop) => stops.push(stop), run, hasBegun: () => running !== null };
}
