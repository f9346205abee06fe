import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { pino } from 'pino';
import { v7 as uuid } from 'uuid';
import { createApp } from '../../server/app.ts';
import { createDataSource } from '../../server/database/data-source.ts';
import { backgroundWork } from '../../server/http/background-work.ts';
import type { Parts } from '../../server/http/parts.ts';
import { loadReferenceData } from '../../server/reference/load-reference-data.ts';
import { readSettings } from '../../server/settings.ts';
import { cloneTemplate } from './cloned-database.ts';

/** What went over the wire for one address: the bytes of the body as they were sent, compressed. */
export interface SentBody {
  path: string;
  type: string;
  encoding: string;
  bytes: number;
}

/** The server as it runs in production, for measurements in a browser. Nobody can sign in: the database is empty. */
export async function startBrowserServer({ port, clientFolder }: { port: number; clientFolder: string }) {
  const database = await cloneTemplate({ port });
  const sent: SentBody[] = [];
  const server = createServer();
  await new Promise<void>((resolve) => {
    server.listen(0, '127.0.0.1', resolve);
  });
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const log = pino({ level: 'silent' });
  const parts: Parts = {
    settings: {
      ...readSettings({ PUBLIC_URL: url }, '/nowhere'),
      sessionSecret: 'a secret of this measurement alone, long enough',
    },
    dataSource: await createDataSource({ url: database.urls.app }).initialize(),
    reference: loadReferenceData(),
    mailer: {
      send: () => Promise.reject(new Error('nobody mails')),
      close: async () => {},
    } as unknown as Parts['mailer'],
    keptMail: null,
    background: backgroundWork(log),
    log,
    now: () => new Date('2026-11-30T15:00:00.000Z'),
    newId: () => uuid(),
    checkAnswers: false,
    clientFolder,
    version: '0.0.0-bench',
  };
  const app = createApp(parts);
  server.on('request', (req, res) => {
    count(req, res, sent);
    app(req, res);
  });
  return {
    url,
    /** Every body so far, in the order in which they ended. */
    sent: (): readonly SentBody[] => [...sent],
    async close() {
      server.closeAllConnections();
      server.close();
      await parts.background.settled();
      await parts.dataSource.destroy();
      await database.drop();
    },
  };
}

/** Sits below the compression, which writes through these two. */
function count(req: IncomingMessage, res: ServerResponse, sent: SentBody[]): void {
  let bytes = 0;
  const size = (chunk: unknown) =>
    typeof chunk === 'string' ? Buffer.byteLength(chunk) : chunk instanceof Uint8Array ? chunk.byteLength : 0;
  const write = res.write.bind(res) as (...words: unknown[]) => boolean;
  const end = res.end.bind(res) as (...words: unknown[]) => ServerResponse;
  res.write = (...words: unknown[]) => {
    bytes += size(words[0]);
    return write(...words);
  };
  res.end = (...words: unknown[]) => {
    bytes += size(words[0]);
    return end(...words);
  };
  res.once('finish', () => {
    sent.push({
      path: String(req.url),
      type: String(res.getHeader('content-type') ?? ''),
      encoding: String(res.getHeader('content-encoding') ?? ''),
      bytes,
    });
  });
}
