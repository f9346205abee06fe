import { createServer } from 'node:net';

/** A port of 127.0.0.1 that nobody listened on a moment ago. */
export function findFreePort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const probe = createServer().once('error', reject);
    probe.listen(0, '127.0.0.1', () => {
      const address = probe.address();
      probe.close(() => resolve(typeof address === 'object' && address ? address.port : 0));
    });
  });
}

/** Why one cannot listen there (`EADDRINUSE`, `EACCES`, `EADDRNOTAVAIL` ...), or null when one can. */
export function whyNotListen(host: string, port: number): Promise<string | null> {
  return new Promise((resolve) => {
    const probe = createServer().once('error', (error: NodeJS.ErrnoException) => resolve(error.code ?? error.message));
    probe.listen({ host, port, exclusive: true }, () => probe.close(() => resolve(null)));
  });
}
