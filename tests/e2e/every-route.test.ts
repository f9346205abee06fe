import type { Page } from 'playwright-core';
import type { RouteObject } from 'react-router-dom';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it, vi } from 'vitest';
import { startTestApp, type TestApp, type TestPerson } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { type FullWorld, startFullWorld } from '../support/browser-full-world.ts';
import { axeFindings, sidewaysFaults, smallTargets } from '../support/browser-judges.ts';
import { ROUTE_PAGES, type RoutePage, type Who } from './routes-and-pages.ts';

/** For a gloved finger on a phone. */
const FIELD_TARGET_PX = 48;
/** WCAG 2.2, 2.5.8. */
const TARGET_PX = 24;

let app: TestApp;
let browser: TestBrowser;
let world: FullWorld;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
  world = await startFullWorld(app);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

const personOf = (who: Who): TestPerson | undefined =>
  who === 'nobody' ? undefined : who === 'owner' ? world.ledger.owner : world[who];

const visitOf = (page: RoutePage, width: number) => {
  const as = personOf(page.who);
  const options = as ? { as } : {};
  return width === 360 ? browser.phone(options) : browser.desk(options);
};

describe('Every route', () => {
  it('has its row in the list of pages, and every row its route', async () => {
    vi.stubGlobal('navigator', { languages: ['en-GB'] });
    const { routes } = await import('../../src/routes.tsx');
    vi.unstubAllGlobals();
    expect(pathsOf(routes).sort()).toEqual(ROUTE_PAGES.map(({ route }) => route).sort());
  });

  describe.each([360, 1440])('at %i px', (width) => {
    it.each(ROUTE_PAGES)('passes axe in both themes, fits and has large enough targets: $route', async (route) => {
      const { page, atRest } = await visitOf(route, width);
      await page.goto(app.url + route.path(world));
      await atRest();
      expect(await axeFindings(page)).toEqual([]);
      expect(await sidewaysFaults(page)).toEqual([]);
      expect(await smallTargets(page, route.field && width === 360 ? FIELD_TARGET_PX : TARGET_PX)).toEqual([]);
      await page.emulateMedia({ colorScheme: 'dark' });
      expect(await axeFindings(page, 'colours')).toEqual([]);
    });
  });
});

describe('An error in a page', () => {
  const pages = ROUTE_PAGES.filter(({ route }) => route !== '/*');

  it.each(pages)('stays inside it, and nothing typed is lost: $route', async (route) => {
    const { page, atRest, forgive, expectRefusal } = await visitOf(route, 360);
    expectRefusal(429, '/client-errors'); // so many errors from one address are not all taken down
    await plantError(page);
    await page.goto(app.url + route.path(world));
    await atRest();
    const [label, text] = route.types ?? [];
    const field = label ? page.getByRole('main').getByRole('textbox', { name: label }).first() : null;
    await field?.fill(String(text));

    await page.evaluate(() => sessionStorage.setItem('planted', 'yes'));
    await page.reload();
    const broke = page.getByRole('heading', { name: 'This page broke' });
    await broke.waitFor();
    expect(await page.getByRole('navigation', { name: 'Areas' }).isVisible()).toBe(true);
    await page.evaluate(() => sessionStorage.removeItem('planted'));
    await page.getByRole('button', { name: 'Try again' }).click();
    await broke.waitFor({ state: 'detached' });
    await atRest();
    if (field) await expect.poll(() => field.inputValue()).toBe(text);
    const reported = app.logLines().filter((line) => line.includes('planted in the page'));
    expect(reported.length).toBeGreaterThan(0);
    forgive(/planted in the page/);
    // As many routes as there are report more errors a minute than the server takes; that it refuses is its own test.
    forgive(/^429 POST \S+client-errors$/);
  });
});

/**
 * Makes the component of every route that is loaded from now on throw while `planted` stands in the tab. The built file
 * is changed on its way to the browser: it names what it exports as the route's component.
 */
async function plantError(page: Page): Promise<void> {
  await page.route('**/assets/*.js', async (route) => {
    const answer = await route.fetch();
    const body = (await answer.text()).replace(
      /(export\s*\{[^}]*?)(?<![\w$])([\w$]+) as Component\b/,
      (_all, before: string, name: string) =>
        `function Planted(__props){if(sessionStorage.getItem('planted'))throw new Error('planted in the page');return ${name}(__props)}` +
        `${before}Planted as Component`,
    );
    await route.fulfill({ response: answer, body });
  });
}

/** `/log`, `/log/:groupId`: every path that leads to a page. */
function pathsOf(routes: readonly RouteObject[], above = ''): string[] {
  return routes.flatMap((route) => {
    const path = route.path === undefined ? above : `${above}/${route.path}`.replace(/\/+/g, '/');
    const isPage = route.lazy !== undefined || route.path === '*';
    return [...(isPage ? [path || '/'] : []), ...pathsOf(route.children ?? [], path === '/' ? '' : path)];
  });
}
