import { AxeBuilder } from '@axe-core/playwright';
import type { Page } from 'playwright-core';

/** The rules that a change of theme can break. */
const COLOUR_RULES = ['color-contrast', 'link-in-text-block'];

/** What axe finds against WCAG 2.0 A to 2.2 AA, a line each; of colours alone, what the theme decides. */
export async function axeFindings(page: Page, what: 'everything' | 'colours' = 'everything'): Promise<string[]> {
  const axe = new AxeBuilder({ page });
  const { violations } = await (what === 'colours'
    ? axe.withRules(COLOUR_RULES)
    : axe.withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
  ).analyze();
  return violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html.slice(0, 200)).join(' | ')}`);
}

/**
 * What scrolls sideways and may not: the page itself, and any part that is not a table whose first column stays.
 * Parts that hide what overflows are as wide as they look and do not count.
 */
export function sidewaysFaults(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const faults: string[] = [];
    const root = document.documentElement;
    if (root.scrollWidth > root.clientWidth) faults.push(`the page is ${root.scrollWidth} px wide`);
    for (const part of document.querySelectorAll<HTMLElement>('body *')) {
      if (part.scrollWidth <= part.clientWidth + 1 || !/auto|scroll/.test(getComputedStyle(part).overflowX)) continue;
      if (part.matches('input, textarea, select')) continue;
      const first = part.querySelector<HTMLElement>('table > tbody > tr > :first-child');
      const stays = first !== null && getComputedStyle(first).position === 'sticky';
      if (!stays) faults.push(`${part.outerHTML.slice(0, 160)} scrolls sideways`);
    }
    return faults;
  });
}

/**
 * Controls smaller than this, in CSS px, both ways. A radio or checkbox is as large as its label, a row of a table as its
 * row; a link inside a sentence is as high as its line (WCAG 2.2, 2.5.8, inline).
 */
export function smallTargets(page: Page, leastPx: number): Promise<string[]> {
  return page.evaluate((least) => {
    const small: string[] = [];
    const selector = 'button, a[href], input, select, summary, textarea, [role="button"], [tabindex="0"]';
    for (const element of document.querySelectorAll<HTMLElement>(selector)) {
      const isTick = element.matches('input[type=radio], input[type=checkbox]');
      const target = (isTick && element.closest('label')) || element;
      const box = target.getBoundingClientRect();
      const { visibility, clipPath } = getComputedStyle(element); // the link that skips the frame is clipped until focused
      const isShown = box.width > 1 && box.height > 1 && visibility !== 'hidden' && clipPath === 'none';
      const isInline = element.matches('p a, li a, td a, dd a') && getComputedStyle(element).display === 'inline';
      const isRegion = element.matches('[tabindex="0"]:not(button, a, input, select, summary, [role="button"], tr)');
      if (isShown && !isInline && !isRegion && (box.height < least - 0.5 || box.width < Math.min(least, 44) - 0.5))
        small.push(`${Math.round(box.width)} x ${Math.round(box.height)}: ${element.outerHTML.slice(0, 160)}`);
    }
    return small;
  }, leastPx);
}
