import { describe, expect, it } from 'vitest';
import { ALLOCATIONS, chargeRequest } from '../../../shared/charge/charge.schema.ts';
import { GWP_SETS } from '../../../shared/reference/gwp.ts';
import { MOUNTINGS, ROOM_STANDARDS } from '../../../shared/room-limit/room-limit.schema.ts';
import { BOUNDS } from './bounds.ts';
import {
  ALLOCATION_CHOICES,
  GWP_SET_CHOICES,
  MOUNTING_CHOICES,
  RATE_KIND_CHOICES,
  ROOM_STANDARD_CHOICES,
} from './fixed-choices.ts';

const valid = {
  job: 'newInstall',
  basis: { refrigerant: 'R-32', factoryChargeG: 1200, rate: { kind: 'flat', gPerM: 20 } },
  lineSet: { branches: [{ name: 'A', liquidOdMm: 6.35, lengthM: 12 }] },
  gwpSet: 'AR4',
};

/** The request with one value put at its place, which is a JSON Pointer. */
function withValue(pointer: string, value: unknown): unknown {
  const copy = structuredClone(valid) as Record<string, unknown>;
  const names = pointer.slice(1).split('/');
  let at: Record<string, unknown> = copy;
  for (const [index, name] of names.slice(0, -1).entries()) {
    at[name] ??= /^\d+$/.test(names[index + 1] ?? '') ? [] : {};
    at = at[name] as Record<string, unknown>;
  }
  at[names.at(-1) as string] = value;
  return copy;
}
const accepts = (pointer: string, value: unknown) => chargeRequest.safeParse(withValue(pointer, value)).success;

describe('The largest value that a field of the charge screen takes', () => {
  it.each([
    ['/basis/factoryChargeG', BOUNDS.massG, 0],
    ['/basis/rate/gPerM', BOUNDS.gPerM, 0],
    ['/basis/limits/maxLengthM', BOUNDS.lengthM, 0],
    ['/lineSet/branches/0/lengthM', BOUNDS.lengthM, 0],
    ['/lineSet/branches/0/riseM', BOUNDS.riseM, -BOUNDS.riseM],
    ['/lineSet/branches/0/bends', BOUNDS.count, 0],
    ['/lineSet/branches/0/equivalentMPerBend', BOUNDS.equivalentMPerBend, 0],
  ])('is the one of the schema: %s', (pointer, most, least) => {
    expect(accepts(pointer, most)).toBe(true);
    expect(accepts(pointer, most + 1)).toBe(false);
    expect(accepts(pointer, least)).toBe(true);
    expect(accepts(pointer, least - 1)).toBe(false);
  });

  it('holds for names, rounding and allowances too', () => {
    expect(accepts('/lineSet/branches/0/name', 'a'.repeat(BOUNDS.nameLength))).toBe(true);
    expect(accepts('/lineSet/branches/0/name', 'a'.repeat(BOUNDS.nameLength + 1))).toBe(false);
    const rounding = (toG: number) => accepts('/basis/rounding', { toG, direction: 'nearest' });
    expect([rounding(BOUNDS.leastRoundingG), rounding(BOUNDS.roundingG)]).toEqual([true, true]);
    expect([rounding(BOUNDS.leastRoundingG / 2), rounding(BOUNDS.roundingG + 1)]).toEqual([false, false]);
    const allowance = (part: object) =>
      accepts('/basis/allowances', [{ label: 'a', gEach: 1, count: 1, factor: 1, ...part }]);
    expect(allowance({ count: BOUNDS.count, factor: BOUNDS.factor, gEach: -BOUNDS.massG })).toBe(true);
    expect(allowance({ count: BOUNDS.count + 1 })).toBe(false);
    expect(allowance({ factor: BOUNDS.factor + 1 })).toBe(false);
    expect(allowance({ label: 'a'.repeat(BOUNDS.labelLength + 1) })).toBe(false);
  });
});

describe('The choices of the charge screen', () => {
  it('are all that the request knows', () => {
    expect([...GWP_SET_CHOICES].sort()).toEqual([...GWP_SETS].sort());
    expect([...ALLOCATION_CHOICES].sort()).toEqual([...ALLOCATIONS].sort());
    expect([...MOUNTING_CHOICES].sort()).toEqual([...MOUNTINGS].sort());
    expect([...ROOM_STANDARD_CHOICES].sort()).toEqual([...ROOM_STANDARDS].sort());
    const kinds = chargeRequest.shape.basis.shape.rate.options.map((option) => option.shape.kind.value);
    expect([...RATE_KIND_CHOICES].sort()).toEqual(kinds.sort());
  });
});
