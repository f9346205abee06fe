import { type AddressInfo, connect, createServer, type Server, type Socket } from 'node:net';

/** A TCP connection to PostgreSQL that a test can cut and mend, as when its server stops and starts again. */
export interface Wire {
  /** Listens and passes everything on to `port`; returns the port to connect to. */
  leadTo(port: number): Promise<number>;
  /** Breaks every connection and refuses new ones. */
  cut(): void;
  mend(): Promise<void>;
}

export async function startWire(): Promise<Wire> {
  const open = new Set<Socket>();
  let server: Server | null = null;
  let target = 0;
  let port = 0;

  const listen = () =>
    new Promise<void>((resolve) => {
      const listening = createServer((near) => {
        const far = connect(target, '127.0.0.1');
        for (const [one, other] of [
          [near, far],
          [far, near],
        ] as const) {
          open.add(one);
          one.pipe(other);
          one.once('error', () => other.destroy()).once('close', () => open.delete(one));
        }
      });
      server = listening;
      listening.listen(port, '127.0.0.1', () => {
        port = (listening.address() as AddressInfo).port;
        resolve();
      });
    });

  return {
    async leadTo(to) {
      target = to;
      await listen();
      return port;
    },
    cut() {
      server?.close();
      for (const socket of open) socket.destroy();
    },
    mend: listen,
  };
}
