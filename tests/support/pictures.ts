import { mkdirSync } from 'node:fs';
import path from 'node:path';
import { type Browser, chromium, type Page } from 'playwright-core';

/**
 * Pictures of screens, for looking at and for the README: every route at every width, in both themes and languages.
 *
 *   npx tsx tests/support/pictures.ts --base http://127.0.0.1:5173 --widths 360,768,1440 --themes light,dark \
 *     --locales en-US,es-ES /charge /sign-in
 *
 * `--cookie name=value` signs in, `--full 0` takes the viewport alone, `--name` sets the first part of the file names,
 * `--fill file.mjs` runs `export default async (page) => {}` before each picture.
 * They go to `dist/pictures` (not in git).
 */
export const CHROMIUM = {
  executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
  args: [
    '--no-sandbox',
    '--disable-gpu',
    '--disable-quic',
    '--no-first-run',
    '--disable-background-networking',
    '--disable-component-update',
    '--disable-sync',
  ],
};

export interface PictureOptions {
  base: string;
  routes: readonly string[];
  widths?: readonly number[];
  themes?: readonly ('light' | 'dark')[];
  locales?: readonly string[];
  folder?: string;
  /** The whole page, or only what fits the window. */
  full?: boolean;
  name?: string;
  cookies?: readonly { name: string; value: string }[];
  /** Brings the page into the state to be shown. */
  prepare?: (page: Page) => Promise<void>;
}

const HEIGHTS: Record<number, number> = { 360: 780, 768: 1024, 1440: 900 };

/** Takes the pictures and returns their paths, and what the console complained about on the way. */
export async function takePictures(browser: Browser, options: PictureOptions) {
  const folder = options.folder ?? path.resolve('dist/pictures');
  mkdirSync(folder, { recursive: true });
  const files: string[] = [];
  const complaints: string[] = [];
  for (const locale of options.locales ?? ['en-US'])
    for (const theme of options.themes ?? ['light'])
      for (const width of options.widths ?? [360, 768, 1440]) {
        const context = await browser.newContext({
          viewport: { width, height: HEIGHTS[width] ?? 900 },
          colorScheme: theme,
          locale,
          reducedMotion: 'reduce',
          isMobile: width < 600,
          hasTouch: width < 600,
          deviceScaleFactor: 1,
        });
        if (options.cookies?.length) {
          await context.addCookies(options.cookies.map((cookie) => ({ ...cookie, url: options.base })));
        }
        const page = await context.newPage();
        page.on('pageerror', (error) => complaints.push(`${error}`));
        for (const route of options.routes) {
          await page.goto(options.base + route, { waitUntil: 'networkidle' });
          await page.evaluate(() => document.fonts.ready);
          await options.prepare?.(page);
          const parts = [
            options.name ?? (route.replace(/[^\w-]+/g, '-').replace(/^-|-$/g, '') || 'start'),
            width,
            theme,
            locale,
          ];
          const file = path.join(folder, `${parts.join('.')}.png`);
          if (options.full ?? true) {
            // A window as high as the page, so that bars stuck to its edges stand where they belong.
            const height = await page.evaluate(() => document.documentElement.scrollHeight);
            await page.setViewportSize({ width, height: Math.max(height, HEIGHTS[width] ?? 900) });
          }
          await page.screenshot({ path: file });
          await page.setViewportSize({ width, height: HEIGHTS[width] ?? 900 });
          files.push(file);
          const overflow = await page.evaluate(
            () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
          );
          if (overflow > 0) complaints.push(`${route} at ${width} px scrolls sideways by ${overflow} px (${locale})`);
        }
        await context.close();
      }
  return { files, complaints };
}

if (process.argv[1] && import.meta.url.endsWith(path.basename(process.argv[1]))) {
  const given = new Map<string, string>();
  const routes: string[] = [];
  for (let i = 2; i < process.argv.length; i++) {
    const word = process.argv[i] as string;
    if (word.startsWith('--')) given.set(word.slice(2), process.argv[++i] ?? '');
    else routes.push(word);
  }
  const list = (name: string) => given.get(name)?.split(',');
  const fill = given.get('fill');
  const prepare = fill ? (await import(path.resolve(fill))).default : undefined;
  const browser = await chromium.launch(CHROMIUM);
  try {
    const cookie = given.get('cookie')?.split('=');
    const { files, complaints } = await takePictures(browser, {
      base: given.get('base') ?? 'http://127.0.0.1:5173',
      routes,
      ...(list('widths') ? { widths: list('widths')?.map(Number) } : {}),
      ...(list('themes') ? { themes: list('themes') as ('light' | 'dark')[] } : {}),
      ...(list('locales') ? { locales: list('locales') } : {}),
      ...(given.has('folder') ? { folder: given.get('folder') } : {}),
      ...(given.has('name') ? { name: given.get('name') } : {}),
      full: given.get('full') !== '0',
      ...(cookie ? { cookies: [{ name: cookie[0] as string, value: cookie.slice(1).join('=') }] } : {}),
      ...(prepare ? { prepare } : {}),
    });
    for (const file of files) process.stdout.write(`${file}\n`);
    for (const complaint of new Set(complaints)) process.stderr.write(`! ${complaint}\n`);
  } finally {
    await browser.close();
  }
}
