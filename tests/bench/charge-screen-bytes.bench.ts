import { chromium } from 'playwright-core';
import { startBrowserServer } from '../support/browser-server.ts';
import { CHROMIUM } from '../support/pictures.ts';
import type { Bench } from './bench.ts';
import { fillCharge } from './charge-screen.ts';

/**
 * The JavaScript that a phone fetches for the charge screen until it shows a figure, in an empty cache, as the server
 * sends it with gzip. Tables and messages are among it: they are built as modules.
 */
export const bench: Bench = {
  async run({ startPostgres, clientFolder, say }) {
    const { port } = await startPostgres();
    const server = await startBrowserServer({ port, clientFolder: clientFolder() });
    const browser = await chromium.launch(CHROMIUM);
    try {
      const context = await browser.newContext({ viewport: { width: 360, height: 780 }, locale: 'en-GB' });
      const page = await context.newPage();
      await page.setExtraHTTPHeaders({ 'Accept-Encoding': 'gzip' });
      await page.goto(`${server.url}/charge`, { waitUntil: 'networkidle' });
      await fillCharge(page);
      await page.waitForLoadState('networkidle');
      const scripts = server.sent().filter(({ type }) => /javascript/.test(type));
      const raw = scripts.filter(({ encoding, bytes }) => encoding !== 'gzip' && bytes > 1024);
      if (scripts.length === 0 || raw.length > 0) {
        throw new Error(`not sent with gzip: ${raw.map(({ path }) => path).join(', ') || 'no script at all'}`);
      }
      for (const { path, bytes } of [...scripts].sort((a, b) => b.bytes - a.bytes)) say(`${bytes} ${path}`);
      return {
        name: 'charge-screen-bytes',
        value: scripts.reduce((sum, { bytes }) => sum + bytes, 0),
        unit: 'bytes',
        against: null,
        bar: { atMost: 200_000 },
      };
    } finally {
      await browser.close();
      await server.close();
    }
  },
};
