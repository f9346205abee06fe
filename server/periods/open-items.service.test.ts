import { describe, expect, it } from 'vitest';
import type { OpenItem } from '../../shared/periods/periods.schema.ts';
import { listedOf, undecided } from './open-items.service.ts';

const item = (key: string, needsDecision: boolean, isCarried = false) =>
  ({ kind: 'job', key, needsDecision, carried: isCarried ? {} : null }) as OpenItem;
const ITEMS = [item('explained', false), item('carried', true, true), item('waits 1', true), item('waits 2', true)];
const keys = (items: readonly OpenItem[]) => items.map(({ key }) => key);

describe('The list of what is open', () => {
  it('holds what waits for a decision before anything else, and counts the rest', () => {
    expect(keys(undecided(ITEMS))).toEqual(['waits 1', 'waits 2']);
    const { items, notListed } = listedOf(ITEMS, 2);
    expect([keys(items), notListed]).toEqual([['waits 1', 'waits 2'], 2]);
    expect(listedOf(ITEMS, 1)).toMatchObject({ items: [{ key: 'waits 1' }], notListed: 3 });
  });

  it('keeps its order, and holds all where there is room', () => {
    expect(keys(listedOf(ITEMS, 3).items)).toEqual(['explained', 'waits 1', 'waits 2']);
    expect(listedOf(ITEMS, 4)).toEqual({ items: ITEMS, notListed: 0 });
  });
});
