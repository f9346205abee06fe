import path from 'node:path';
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core';
import type { TestContext } from 'vitest';
import type { TestApp, TestPerson } from './app.ts';
import { CHROMIUM } from './pictures.ts';

export interface VisitOptions {
  width?: number;
  height?: number;
  theme?: 'light' | 'dark';
  locale?: string;
  /** Signed in from the start; without it nobody is. */
  as?: TestPerson;
}

/** One person's browser: a page, and everything that went wrong in it. */
export interface Visit {
  page: Page;
  context: BrowserContext;
  /**
   * An answer of the server that this test provokes: the status and a part of the address. Any other refusal, console
   * error, thrown error or request to another site is a complaint.
   */
  expectRefusal(status: number, part: string): void;
  complaints(): string[];
}

export interface TestBrowser {
  /** 360 x 780, touch. The tests' clock stands, so the page's stands too. */
  phone(options?: VisitOptions): Promise<Visit>;
  desk(options?: VisitOptions): Promise<Visit>;
  /**
   * Closes every visit and says what was complained about in any. Of a failed test each page is kept as a picture in
   * `dist/pictures` (not in git).
   */
  endVisits(test: Readonly<TestContext['task']>): Promise<string[]>;
  close(): Promise<void>;
}

export async function startBrowser(app: TestApp): Promise<TestBrowser> {
  const browser = await chromium.launch(CHROMIUM);
  let visits: Visit[] = [];
  const open = async (options: VisitOptions): Promise<Visit> => {
    const visit = await startVisit(browser, app, options);
    visits.push(visit);
    return visit;
  };
  return {
    phone: (options = {}) => open({ width: 360, height: 780, ...options }),
    desk: (options = {}) => open({ width: 1440, height: 900, ...options }),
    async endVisits(test) {
      const ended = visits;
      visits = [];
      for (const [index, { page, context }] of ended.entries()) {
        if (test.result?.state === 'fail') {
          const name = `failed-${test.name.replace(/\W+/g, '-').slice(0, 60)}-${index}.png`;
          await page.screenshot({ path: path.resolve('dist/pictures', name), fullPage: true }).catch(() => undefined);
        }
        await context.close();
      }
      return ended.flatMap((visit) => visit.complaints());
    },
    close: () => browser.close(),
  };
}

async function startVisit(browser: Browser, app: TestApp, options: VisitOptions): Promise<Visit> {
  const { width = 1440, height = 900, theme = 'light', locale = 'en-GB' } = options;
  const context = await browser.newContext({
    viewport: { width, height },
    colorScheme: theme,
    locale,
    timezoneId: 'UTC',
    hasTouch: width < 600,
    isMobile: width < 600,
    reducedMotion: 'reduce',
    acceptDownloads: true,
  });
  await context.clock.setFixedTime(app.parts.now());
  if (options.as) await context.addCookies([await cookieOf(app, options.as)]);
  const expected: { status: number; part: string }[] = [{ status: 401, part: '/api/v1/session' }];
  const complaints: string[] = [];
  context.on('request', (request) => {
    if (!request.url().startsWith(app.url) && !/^(data|blob):/.test(request.url())) {
      complaints.push(`asked another site: ${request.url()}`);
    }
  });
  context.on('response', (response) => {
    const status = response.status();
    const known = expected.some((each) => each.status === status && response.url().includes(each.part));
    if (status >= 400 && !known) complaints.push(`${status} ${response.request().method()} ${response.url()}`);
  });
  context.on('console', (message) => {
    // The browser repeats every refused answer; those are judged above.
    const repeated = message.text().startsWith('Failed to load resource');
    if (message.type() === 'error' && !repeated) complaints.push(`console: ${message.text()}`);
  });
  context.on('weberror', (error) => complaints.push(`thrown: ${error.error()}`));
  const page = await context.newPage();
  page.setDefaultTimeout(15_000);
  return {
    page,
    context,
    expectRefusal: (status, part) => void expected.push({ status, part }),
    complaints: () => [...complaints],
  };
}

async function cookieOf(app: TestApp, person: TestPerson) {
  const { cookie } = await app.signIn(person);
  const [name = '', value = ''] = (cookie ?? '').split('=');
  return { name, value, url: app.url };
}
