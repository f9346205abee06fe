/**
 * Calls `stop` once for the first of SIGINT, SIGTERM and SIGHUP, then ends this process. A terminal's Ctrl-C arrives
 * twice under npm, which passes it on, so further signals are ignored while it stops.
 */
export function stopOnSignals(stop: (signal: string) => Promise<void>): void {
  let stopping = false;
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
    process.on(signal, () => {
      if (stopping) return;
      stopping = true;
      stop(signal).then(
        () => process.exit(0),
        (error: unknown) => {
          console.error(error);
          process.exit(1);
        },
      );
    });
  }
}
