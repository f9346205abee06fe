import path from 'node:path';
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core';
import type { TestContext } from 'vitest';
import type { TestApp, TestPerson } from './app.ts';
import { CHROMIUM } from './pictures.ts';

/** Long enough for an answer to be drawn and to lead to the next request. */
const QUIET_MS = 120;

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
  /** Waits until nothing is asked for any more, the fonts are there and nothing stands in for what is still loading. */
  atRest(): Promise<void>;
  /**
   * An answer of the server that this test provokes: the status and a part of the address. Any other refusal, console
   * error, thrown error or request to another site is a complaint.
   */
  expectRefusal(status: number, part: string): void;
  /** Takes back what was complained about so far and fits: an error that this test planted. */
  forgive(what: RegExp): void;
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
  const cookies = new Map<string, Promise<SessionCookie>>();
  /** Somebody signs in once for all their visits: a password takes long to check on purpose. */
  const cookieOf = (person: TestPerson): Promise<SessionCookie> => {
    const known = cookies.get(person.id) ?? signedInCookie(app, person);
    cookies.set(person.id, known);
    return known;
  };
  const open = async (options: VisitOptions): Promise<Visit> => {
    const cookie = options.as ? await cookieOf(options.as) : null;
    const visit = await startVisit(browser, app, { ...options, cookie });
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

async function startVisit(
  browser: Browser,
  app: TestApp,
  options: VisitOptions & { cookie: SessionCookie | null },
): Promise<Visit> {
  const { width = 1440, height = 900, theme = 'light', locale = 'en-GB', cookie } = options;
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
  if (cookie) await context.addCookies([cookie]);
  const expected: { status: number; part: string }[] = [{ status: 401, part: '/api/v1/session' }];
  let complaints: string[] = [];
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
  let underWay = 0;
  let quietSince = Date.now();
  const ended = () => {
    underWay -= 1;
    quietSince = Date.now();
  };
  context.on('request', () => {
    underWay += 1;
  });
  context.on('requestfinished', ended);
  context.on('requestfailed', ended);
  const page = await context.newPage();
  page.setDefaultTimeout(15_000);
  return {
    page,
    context,
    async atRest() {
      const loading = () =>
        document.fonts.status !== 'loaded' ||
        !document.querySelector('h1, h2') ||
        document.querySelector('[aria-busy="true"]');
      const until = Date.now() + 15_000;
      while (underWay > 0 || Date.now() - quietSince < QUIET_MS || (await page.evaluate(loading))) {
        if (Date.now() > until) throw new Error(`${page.url()} does not come to rest`);
        await page.waitForTimeout(20);
      }
    },
    expectRefusal: (status, part) => void expected.push({ status, part }),
    forgive: (what) => {
      complaints = complaints.filter((each) => !what.test(each));
    },
    complaints: () => [...complaints],
  };
}

interface SessionCookie {
  name: string;
  value: string;
  url: string;
}

async function signedInCookie(app: TestApp, person: TestPerson): Promise<SessionCookie> {
  const { cookie } = await app.signIn(person);
  const [name = '', value = ''] = (cookie ?? '').split('=');
  return { name, value, url: app.url };
}
