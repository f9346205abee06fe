import { chromium, type Page } from 'playwright-core';
import { startBrowserServer } from '../support/browser-server.ts';
import { CHROMIUM } from '../support/pictures.ts';
import type { Bench } from './bench.ts';
import { fillCharge } from './charge-screen.ts';

const CPU_SLOWDOWN = 4;
/** So many keys in each of the fields; the first few warm up. */
const KEYS = 20;
const WARM_UP = 4;
const ROUNDS = 3;
const FIELDS = ['pipe run, one way', 'factory charge', 'rate in the manual'];

declare global {
  interface Window {
    /** Milliseconds from each key to the frame that shows its total. */
    keystrokes: number[];
  }
}

/**
 * From the moment the browser got the key to the frame that shows another total, as the page itself sees it. The frame
 * callback runs before that frame is painted; the message that is sent from it arrives when it has been.
 */
function watchKeystrokes(): void {
  window.keystrokes = [];
  const output = document.querySelector('output');
  if (!output) throw new Error('the charge screen has no output');
  let pressedAt = 0;
  window.addEventListener(
    'keydown',
    (event) => {
      pressedAt = event.timeStamp;
    },
    { capture: true },
  );
  const painted = new MessageChannel();
  painted.port1.onmessage = () => {
    if (pressedAt > 0) window.keystrokes.push(performance.now() - pressedAt);
    pressedAt = 0;
  };
  new MutationObserver(() => {
    requestAnimationFrame(() => painted.port2.postMessage(null));
  }).observe(output, { childList: true, characterData: true, subtree: true });
}

async function typeIn(page: Page, field: string): Promise<number[]> {
  await page.evaluate(() => {
    window.keystrokes = [];
  });
  await page.getByRole('textbox', { name: field }).focus();
  await page.keyboard.press('End');
  for (let key = 0; key < KEYS; key++) {
    await page.keyboard.press(key % 2 === 0 ? '5' : 'Backspace'); // 12 -> 125 -> 12: another total each time
    await page.waitForFunction((count) => window.keystrokes.length > count, key);
    await page.waitForTimeout(120); // what a keystroke leaves for later is done before the next, as with a hand
  }
  return (await page.evaluate(() => window.keystrokes)).slice(WARM_UP);
}

const medianOf = (values: readonly number[]): number => {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)] ?? Number.NaN;
};

/**
 * How long a person on a slow phone waits for the total after a key, with the processor slowed four times: the median of
 * the round that other work on the computer disturbed least.
 */
export const bench: Bench = {
  async run({ startPostgres, clientFolder, say }) {
    const { port } = await startPostgres();
    const server = await startBrowserServer({ port, clientFolder: clientFolder() });
    const browser = await chromium.launch(CHROMIUM);
    try {
      const context = await browser.newContext({
        viewport: { width: 360, height: 780 },
        locale: 'en-GB',
        isMobile: true,
        hasTouch: true,
      });
      const page = await context.newPage();
      await page.goto(`${server.url}/charge`, { waitUntil: 'networkidle' });
      await fillCharge(page);
      await page.waitForLoadState('networkidle');
      const devTools = await context.newCDPSession(page);
      await devTools.send('Emulation.setCPUThrottlingRate', { rate: CPU_SLOWDOWN });
      await page.evaluate(watchKeystrokes);
      const medians: number[] = [];
      for (let round = 0; round < ROUNDS; round++) {
        const all: number[] = [];
        for (const field of FIELDS) {
          const taken = await typeIn(page, field);
          say(`${field}: median ${medianOf(taken).toFixed(1)}, ${taken.map((each) => each.toFixed(0)).join(' ')} ms`);
          all.push(...taken);
        }
        medians.push(medianOf(all));
      }
      return { name: 'keystroke', value: Math.min(...medians), unit: 'ms', against: null, bar: { atMost: 50 } };
    } finally {
      await browser.close();
      await server.close();
    }
  },
};
