import type { Page } from 'playwright-core';

/** Fills in the invented unit of the tests: R-32, 1,200 g, 7.5 m pre-charged, 20 g/m, 12 m of 1/4 in. */
export async function fillCharge(page: Page): Promise<void> {
  await page.getByRole('combobox', { name: 'refrigerant' }).selectOption('R-32');
  await page.getByRole('textbox', { name: 'factory charge' }).fill('1200');
  await page.getByRole('combobox', { name: 'liquid pipe' }).selectOption('6.35');
  await page.getByRole('textbox', { name: 'pipe run, one way' }).fill('12');
  await page.getByRole('textbox', { name: 'pre-charged by the factory' }).fill('7.5');
  await page.getByRole('textbox', { name: 'rate in the manual' }).fill('20');
  await page.getByText('weigh in 90 g').waitFor();
}
