import { describe, expect, it } from 'vitest';
import { loadReferenceData } from '../reference/load-reference-data.ts';
import { brenhavenHistory } from './brenhaven/history.ts';
import type { DiaryLine } from './demo-order.ts';
import { harrowTansyHistory } from './harrow-tansy/history.ts';

const reference = loadReferenceData();
const histories = { 'Harrow & Tansy': harrowTansyHistory, Brenhaven: brenhavenHistory };

/** A Thursday at work, a Sunday at midnight, the Monday after the clocks went forward, a night in which they go back. */
const MOMENTS = ['2026-12-10T15:20:00Z', '2026-12-13T05:01:00Z', '2027-03-15T12:00:00Z', '2026-11-01T06:30:00Z'];

const withoutDates = (lines: readonly DiaryLine[]): string[] =>
  lines
    .map(({ by, order }) => JSON.stringify([by, order]))
    .map((text) => text.replaceAll(/[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f-]{21}|\d{4}-\d\d-\d\d(T[\d:.]+Z)?/g, '-'));

describe.each(Object.entries(histories))('The history of %s', (_, history) => {
  it('is the same for the same now', () => {
    const now = new Date(MOMENTS[0] as string);
    const [one, other] = [history(now, reference), history(now, reference)].map(({ lines }) => JSON.stringify(lines));
    expect(one === other).toBe(true);
  });

  it.each(MOMENTS)('ends at %s, and its last hours hold something', (moment) => {
    const now = new Date(moment);
    const { lines } = history(now, reference);
    const times = lines.map(({ recordedAt }) => recordedAt.getTime());
    expect(times).toEqual(times.toSorted((a, b) => a - b));
    expect(times.at(-1)).toBeLessThanOrEqual(now.getTime());
    expect(now.getTime() - (times.at(-1) ?? 0)).toBeLessThan(3 * 3600_000);
  });

  it('makes an id of version 7 for each thing, and none twice', () => {
    const { lines } = history(new Date(MOMENTS[0] as string), reference);
    const made = lines.flatMap(({ order }) =>
      order.call === 'postGroup'
        ? [
            order.request.groupId,
            ...[...(order.request.entries ?? []), ...(order.request.readings ?? [])].map(({ id }) => id),
          ]
        : [],
    );
    expect(made.length).toBeGreaterThan(50);
    expect(new Set(made).size).toBe(made.length);
    for (const id of made) expect(id).toMatch(/^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/);
  });

  it('tells the same story on any day', () => {
    const [first, ...others] = MOMENTS.map((moment) => {
      const told = withoutDates(history(new Date(moment), reference).lines);
      // Whether an invoice of the last days has come yet depends on the weekend between.
      return told.filter((line) => !line.includes('picked up by its label')).sort();
    });
    for (const other of others) {
      expect(other).toHaveLength(first?.length ?? 0);
      expect(other.find((line, index) => line !== first?.[index])).toBeUndefined();
    }
  });
});
