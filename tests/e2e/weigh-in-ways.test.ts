import type { Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser, type Visit } from '../support/browser.ts';
import { type Walk, walkOf } from '../support/browser-walk.ts';
import { wordsIn } from '../support/browser-words.ts';
import { CONTENT_G, startWorld, type World } from '../support/browser-world.ts';
import { inCylinder, inUnit, massOf, posted as posted201, weighIn } from '../support/ledger.ts';

const say = wordsIn('en-GB');
let app: TestApp;
let browser: TestBrowser;
let world: World;
let visit: Visit;
let walk: Walk;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
});
beforeEach(async () => {
  world = await startWorld(app);
  visit = await browser.phone({ as: world.technician });
  walk = walkOf(visit.page, say);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

const GROUPS = '**/api/v1/entry-groups';
const HOSE_G = 28;

/** Up to the page that posts 90 g, without a charge sheet: a refill by weight. */
async function toReview(page: Page): Promise<void> {
  await page.goto(`${app.url}/units/${world.unit.id}/weigh-in`);
  await walk.answer(say('weighIn.purpose.refill')).click();
  await walk.box(say('weighIn.target.mass')).fill('90 g');
  await walk.button(say('weighIn.goOn')).click();
  await walk.startOnScale('7741', '17105');
  await walk.endOnScale('17015');
  await page.getByRole('radio', { name: /^More than full/ }).check();
}

const post = () => walk.button(say('weighIn.review.post', { mass: '90 g' }));
const posted = (page: Page) => page.getByRole('status').getByText('90 g').waitFor();

/** Groups of masses that went into the unit since it came from the factory. */
async function weighedIn(): Promise<number[]> {
  const { items } = (await world.ledger.client.get(`/entries?unitId=${world.unit.id}&kind=refill&sort=sequence`)).body;
  return items.map(({ massG }: { massG: number }) => massG);
}

describe('Posting a weigh-in', () => {
  it('happens once when the button is pressed twice', async () => {
    const { page } = visit;
    await toReview(page);
    await post().dblclick();
    await posted(page);
    expect(await weighedIn()).toEqual([90, HOSE_G]);
  });

  it('keeps everything when the server fails, and posts at the next press', async () => {
    const { page } = visit;
    await toReview(page);
    visit.expectRefusal(500, '/entry-groups');
    await page.route(GROUPS, (route) => route.fulfill({ status: 500, body: 'the proxy says no' }), { times: 1 });
    await post().click();
    await page.getByRole('alert').waitFor();
    expect(await page.getByText('90 g').first().isVisible()).toBe(true);
    expect(await weighedIn()).toEqual([]);

    await post().click();
    await posted(page);
    expect(await weighedIn()).toEqual([90, HOSE_G]);
  });

  it('stands once when its answer is lost on the way and the button is pressed again', async () => {
    const { page } = visit;
    await toReview(page);
    await page.route(
      GROUPS,
      async (route) => {
        await route.fetch();
        await route.abort('connectionreset');
      },
      { times: 1 },
    );
    await post().click();
    await page.getByText(say('weighIn.post.offline')).waitFor();
    expect(await weighedIn()).toEqual([90, HOSE_G]);

    await post().click();
    await posted(page);
    expect(await weighedIn()).toEqual([90, HOSE_G]);
  });

  it('goes on where it was after a reload in the middle', async () => {
    const { page } = visit;
    await toReview(page);
    await page.reload();
    await post().click();
    await posted(page);
    expect(await weighedIn()).toEqual([90, HOSE_G]);
  });
});

describe('A weigh-in left open', () => {
  it('stands on the technician’s day until the cylinder is weighed back', async () => {
    const { page } = visit;
    await page.goto(`${app.url}/units/${world.unit.id}/weigh-in`);
    await walk.answer(say('weighIn.purpose.refill')).click();
    await walk.box(say('weighIn.target.mass')).fill('90 g');
    await walk.button(say('weighIn.goOn')).click();
    await walk.startOnScale('7741', '17105');
    await walk.button(say('weighIn.charging.leaveOpen')).click();
    await walk.button(say('weighIn.leaveOpen.act')).click();
    await page.getByText(say('weighIn.done.open.text')).waitFor();
    expect(await world.ledger.contentG(world.cylinder.id)).toBe(CONTENT_G);

    await page.goto(app.url);
    await page.getByRole('link', { name: /7741.*0412/ }).click();
    await page.getByRole('heading', { name: say('weighIn.weighBack.title', { unit: '0412' }) }).waitFor();
    await walk.keyIn('17200');
    await page.getByRole('radio', { name: say('weighIn.hoseEnd.lost') }).check();
    await walk.button(say('weighIn.weighBack.act')).click();
    await page.getByRole('alert').filter({ hasText: '17,200 g is above the start, 17,105 g' }).waitFor();

    await walk.keyIn('17015');
    await page.getByRole('radio', { name: /^More than full/ }).check();
    await post().click();
    await posted(page);
    expect(await weighedIn()).toEqual([90, HOSE_G]);
    expect(await world.ledger.contentG(world.cylinder.id)).toBe(CONTENT_G - 90 - HOSE_G);
    await page.goto(app.url);
    await page.getByText(say('today.toWeighBack.none')).waitFor();
  });
});

describe('A wrong entry', () => {
  it('is reversed and corrected through the screen, with its reason, by whoever may', async () => {
    await toReview(visit.page);
    await post().click();
    await posted(visit.page);

    const { page } = await browser.desk({ as: world.manager });
    const desk = walkOf(page, say);
    await page.goto(`${app.url}/log`);
    const row = page.getByRole('row').filter({ hasText: '0412' }).filter({ hasText: '90' }).first();
    await row.getByRole('link').first().click();
    await desk.button(say('log.reverse.act')).click();
    await page.getByRole('button', { name: /^Reverse 2 entries/ }).click();
    await page
      .getByRole('alert')
      .filter({ hasText: say('log.reverse.reasonNeeded') })
      .waitFor();
    await desk.box(say('log.reverse.reason')).fill('the other unit was meant');
    await page.getByRole('button', { name: /^Reverse 2 entries/ }).click();
    await page.getByText(say('log.reverse.done')).waitFor();
    expect(await world.ledger.bookG(world.unit.id)).toBe(1200);
    expect(await world.ledger.contentG(world.cylinder.id)).toBe(CONTENT_G);
  });

  it('of one mass is entered right in the same step, and both stand or fall together', async () => {
    const { scale, client } = world.ledger;
    const at = { cylinderId: world.cylinder.id, unitId: world.unit.id };
    const wrong = weighIn({ scale }, { ...at, beforeG: CONTENT_G, afterG: CONTENT_G - 90 });
    await posted201(client, {
      ...wrong,
      kind: 'refill',
      entries: [massOf('90', inCylinder(at.cylinderId), inUnit(at.unitId), { refrigerant: 'R-32' })],
      statements: [{ about: 'unit', id: at.unitId, is: 'moreThanFull', by: null }],
    });
    const { page } = await browser.desk({ as: world.manager });
    const desk = walkOf(page, say);
    await page.goto(`${app.url}/log/${wrong.groupId}`);
    await desk.button(say('log.reverse.act')).click();
    await desk.box(say('log.reverse.reason')).fill('read wrongly off the scale');
    await page.getByRole('checkbox', { name: say('log.reverse.withReplacement') }).check();
    const after = desk.box(say('log.replace.reading.after'));
    await page.getByRole('button', { name: say('log.reverse.doAndCorrectNotYet', { mass: '90 g' }) }).click();
    await page
      .getByRole('alert')
      .filter({ hasText: say('log.replace.same') })
      .waitFor();
    await after.fill('17048');
    await page.getByRole('button', { name: say('log.reverse.doAndCorrect', { mass: '90 g', right: '85 g' }) }).click();
    await page.getByText(say('log.reverse.doneCorrected')).waitFor();
    expect(await world.ledger.bookG(world.unit.id)).toBe(1285);
    expect(await world.ledger.contentG(world.cylinder.id)).toBe(CONTENT_G - 85);
  });
});
