import { readFileSync } from 'node:fs';
import path from 'node:path';
import { chromium } from 'playwright-core';
import { CHROMIUM } from './pictures.ts';

export interface DrawnPage {
  /** Share of the paper that is printed on, 0 to 1. */
  ink: number;
  /** How much of its height is printed on, 0 to 1: an empty page with a foot alone has little. */
  filled: number;
  png: Buffer;
}

const HOST = 'https://paper.test';
const FILES = 'node_modules/pdfjs-dist/legacy/build';
const PAGE = `<!doctype html><title>paper</title><script type="module">
  import { getDocument, GlobalWorkerOptions } from '/pdf.min.mjs';
  GlobalWorkerOptions.workerSrc = '/pdf.worker.min.mjs';
  window.drawPages = async (bytes) => {
    const pdf = await getDocument({ data: new Uint8Array(bytes), isEvalSupported: false }).promise;
    const drawn = [];
    for (let number = 1; number <= pdf.numPages; number++) {
      const page = await pdf.getPage(number);
      const viewport = page.getViewport({ scale: 1.5 });
      const canvas = document.createElement('canvas');
      canvas.width = Math.ceil(viewport.width);
      canvas.height = Math.ceil(viewport.height);
      const canvasContext = canvas.getContext('2d');
      await page.render({ canvasContext, viewport }).promise;
      const { data } = canvasContext.getImageData(0, 0, canvas.width, canvas.height);
      const rows = new Set();
      let dark = 0;
      for (let at = 0; at < data.length; at += 4) {
        if (data[at + 3] < 128 || data[at] + data[at + 1] + data[at + 2] > 384) continue;
        dark += 1;
        rows.add(Math.floor(at / 4 / canvas.width / 8));
      }
      drawn.push({
        ink: dark / (canvas.width * canvas.height),
        filled: (rows.size * 8) / canvas.height,
        png: canvas.toDataURL('image/png'),
      });
    }
    return drawn;
  };
</script>`;

/** Draws each page as a reader's screen would, in a browser of its own that reaches nothing but this. */
export async function drawPdf(bytes: Buffer): Promise<DrawnPage[]> {
  const browser = await chromium.launch(CHROMIUM);
  try {
    const page = await browser.newPage();
    await page.route('**/*', async (route) => {
      const { pathname } = new URL(route.request().url());
      if (pathname === '/') return route.fulfill({ contentType: 'text/html', body: PAGE });
      const file = path.join(FILES, path.basename(pathname));
      return pathname.endsWith('.mjs')
        ? route.fulfill({ contentType: 'text/javascript', body: readFileSync(file) })
        : route.abort();
    });
    await page.goto(`${HOST}/`);
    await page.waitForFunction('typeof window.drawPages === "function"');
    const drawn = (await page.evaluate(`window.drawPages(${JSON.stringify([...bytes])})`)) as {
      ink: number;
      filled: number;
      png: string;
    }[];
    return drawn.map(({ png, ...rest }) => ({
      ...rest,
      png: Buffer.from(png.slice(png.indexOf(',') + 1), 'base64'),
    }));
  } finally {
    await browser.close();
  }
}
