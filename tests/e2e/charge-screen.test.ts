import type { Page } from 'playwright-core';
import { afterAll, afterEach, beforeAll, describe, expect, inject, it } from 'vitest';
import { startTestApp, type TestApp } from '../support/app.ts';
import { startBrowser, type TestBrowser } from '../support/browser.ts';
import { axeFindings, sidewaysFaults, smallTargets } from '../support/browser-judges.ts';

let app: TestApp;
let browser: TestBrowser;
beforeAll(async () => {
  app = await startTestApp({ parts: { clientFolder: inject('clientFolder') } });
  browser = await startBrowser(app);
});
afterEach(async ({ task }) => {
  expect(await browser.endVisits(task)).toEqual([]);
});
afterAll(async () => {
  await browser?.close();
  await app?.close();
});

async function enterCharge(page: Page, runM: string): Promise<void> {
  await page.getByRole('combobox', { name: 'refrigerant' }).selectOption('R-32');
  await page.getByRole('textbox', { name: 'factory charge' }).fill('1200');
  await page.getByRole('combobox', { name: 'liquid pipe' }).selectOption('6.35');
  await page.getByRole('textbox', { name: 'pipe run, one way' }).fill(runM);
  await page.getByRole('textbox', { name: 'pre-charged by the factory' }).fill('7.5');
  await page.getByRole('textbox', { name: 'rate in the manual' }).fill('20');
}

describe('The charge screen without signing in', () => {
  it('gives 1,290 g and 90 g for 12.0 m on a small phone, and keeps it over a reload', async () => {
    const { page } = await browser.phone();
    await page.goto(`${app.url}/charge`);
    await enterCharge(page, '12.0');
    await page.getByText('weigh in 90 g').waitFor();
    expect(await page.locator('output').textContent()).toMatch(/^1,290\s*g$/);

    await page.reload();
    await page.getByText('weigh in 90 g').waitFor();
    expect(await page.getByRole('textbox', { name: 'pipe run, one way' }).inputValue()).toBe('12.0');
  });

  it('goes on answering when the server has gone away', async () => {
    const { page, context, forgive } = await browser.phone();
    await page.goto(`${app.url}/charge`);
    await enterCharge(page, '12.0');
    await page.getByText('weigh in 90 g').waitFor();
    await context.setOffline(true);
    await page.getByRole('textbox', { name: 'pipe run, one way' }).fill('9.5');
    await page.getByText('weigh in 40 g').waitFor();
    await page.getByText('no connection').waitFor();
    forgive(/ERR_INTERNET_DISCONNECTED/);
  });

  it('passes axe, fits 360 px and has targets of 48 px with every part open and a danger shown', async () => {
    const { page } = await browser.phone();
    await page.goto(`${app.url}/charge`);
    await enterCharge(page, '50');
    await page.getByText('Cylinder on the scale').click();
    await page.getByText('More figures').click();
    await page.getByText('Smallest room served', { exact: true }).click();
    await page.getByRole('textbox', { name: 'floor area' }).fill('3');
    await page.getByText('DANGER').waitFor();
    expect(await axeFindings(page)).toEqual([]);
    expect(await sidewaysFaults(page)).toEqual([]);
    expect(await smallTargets(page, 48)).toEqual([]);
    await page.emulateMedia({ colorScheme: 'dark' });
    expect(await axeFindings(page, 'colours')).toEqual([]);
  });
});
