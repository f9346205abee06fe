import { describe, expect, it } from 'vitest';
import { findUsualTube, nearestByOd } from './find-tube.ts';
import { referenceData } from './reference-data.fixture.ts';

const find = (odMm: number) => findUsualTube(referenceData.tubes, odMm);

describe('The usual tube of an outside diameter', () => {
  it('is the EN 12735-1 wall: 0.8 mm to 1/2 in, 1.0 mm above', () => {
    expect(find(6.35)).toMatchObject({ standard: 'EN 12735-1', wallMm: 0.8, idMm: 4.75 });
    expect(find(9.52)).toMatchObject({ wallMm: 0.8, idMm: 7.92 });
    expect(find(12.7)).toMatchObject({ wallMm: 0.8 });
    expect(find(15.88)).toMatchObject({ wallMm: 1 });
  });

  it('takes what manuals print for the same pipe: 9.5, 9.525, 9.53 mm', () => {
    for (const printed of [9.5, 9.525, 9.53, 9.67]) expect(find(printed)?.odMm).toBe(9.52);
    expect(find(9.671)).toBeNull();
    expect(find(7)).toBeNull();
  });

  it('is the nearest where two are within 0.15 mm, the inch-series one in the very middle', () => {
    expect(find(15.93)?.odMm).toBe(15.88);
    expect(find(15.94)?.odMm).toBe(15.88);
    expect(find(15.95)?.odMm).toBe(16);
    expect(find(22.2)?.odMm).toBe(22.22);
    expect(find(22.05)?.odMm).toBe(22);
  });

  it('works for a manual’s own list of sizes', () => {
    const sizes = [{ liquidOdMm: 6.35 }, { liquidOdMm: 9.52 }];
    expect(nearestByOd(sizes, (size) => size.liquidOdMm, 6.4)).toBe(sizes[0]);
    expect(nearestByOd(sizes, (size) => size.liquidOdMm, 8)).toBeNull();
  });
});
