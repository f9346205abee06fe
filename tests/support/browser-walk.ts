import type { Page } from 'playwright-core';
import { TEST_PASSWORD, type TestPerson } from './app.ts';
import type { Words } from './browser-words.ts';

/** Steps through the screens as a person does them, in whichever language the words are. */
export function walkOf(page: Page, say: Words) {
  const button = (name: string) => page.getByRole('button', { name, exact: true });
  const link = (name: string) => page.getByRole('link', { name, exact: true });
  const box = (name: string) => page.getByRole('textbox', { name, exact: true });
  const heading = (name: string) => page.getByRole('heading', { name, exact: true });
  /** Answers one question of the weigh-in by pressing its row, which begins with these words. */
  const answer = (words: string) => page.getByRole('main').getByRole('button').filter({ hasText: words }).first();

  return {
    page,
    say,
    button,
    link,
    box,
    heading,
    answer,

    async signIn(person: Pick<TestPerson, 'email'>, password = TEST_PASSWORD) {
      await box(say('session.email')).fill(person.email);
      await page.getByLabel(say('session.password'), { exact: true }).fill(password);
      await button(say('session.signIn.act')).click();
    },

    /** From the bar of a phone: more, Units, the unit by a part of its tag. */
    async openUnit(tag: string) {
      await link(say('frame.more')).click();
      await page
        .getByRole('main')
        .getByRole('link', { name: say('frame.units'), exact: true })
        .click();
      await page.getByRole('searchbox', { name: say('units.filter.search') }).fill(tag);
      await page.getByRole('main').getByRole('link').filter({ hasText: tag }).first().click();
      await heading(say('units.unit.title', { tag })).waitFor();
    },

    async keyIn(reading: string) {
      const pad = page.getByRole('group', { name: say('weighIn.pad') });
      await pad.getByRole('button', { name: say('weighIn.key.clear') }).click();
      for (const digit of reading) await pad.getByRole('button', { name: digit, exact: true }).click();
    },

    /** From the choice of the cylinder to its start reading, to a known stop: gross on scale 1, a hose with 28 g, lost. */
    async startOnScale(cylinder: string, start: string) {
      await heading(say('weighIn.cylinder.title')).waitFor();
      await answer(cylinder).click();
      await page.getByRole('radio', { name: 'Scale 1' }).check();
      await page.getByRole('radio', { name: say('weighIn.mode.gross') }).check();
      await button(say('weighIn.goOn')).click();
      await page.getByRole('radio', { name: say('weighIn.hose.full.yes') }).check();
      await box(say('weighIn.hose.content')).fill('28');
      await button(say('weighIn.goOn')).click();
      await heading(say('weighIn.hosePlan.title', { hose: '28 g' })).waitFor();
      await answer(say('weighIn.hoseEnd.lost')).click();
      await this.keyIn(start);
      await button(say('weighIn.start.act')).click();
    },

    async endOnScale(end: string) {
      await this.keyIn(end);
      await button(say('weighIn.charging.end')).click();
      await heading(say('weighIn.hoseEnd.title', { hose: '28 g' })).waitFor();
      await answer(say('weighIn.hoseEnd.lost')).click();
    },
  };
}
export type Walk = ReturnType<typeof walkOf>;
