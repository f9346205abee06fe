import { describe, expect, it } from 'vitest';
import type { EmissionLine } from '../../../../shared/books/emissions.schema.ts';
import { layOutBars, lossesByMonth } from './month-bars.ts';

const line = (
  key: string,
  refrigerant: string,
  totalG: number,
  co2eT: number | null = totalG / 1000,
): EmissionLine => ({
  key,
  label: key,
  refrigerant,
  measuredG: 0,
  inferredG: totalG,
  hoseG: 0,
  totalG,
  atLeastG: 0,
  beforeOurCareG: 0,
  co2eT,
  beforeOurCareCo2eT: 0,
  gwp: co2eT === null ? null : 1000,
});

describe('losses by month', () => {
  it('have every month of the period once, all refrigerants together, and nothing where nothing was lost', () => {
    const lines = [line('2026-01', 'R-32', 300), line('2026-01', 'R-410A', 200), line('2026-03', 'R-32', -100)];
    expect(lossesByMonth(lines, '2025-12', '2026-03').map(({ month, totalG }) => [month, totalG])).toEqual([
      ['2025-12', 0],
      ['2026-01', 500],
      ['2026-02', 0],
      ['2026-03', -100],
    ]);
  });

  it('have no CO2 equivalent where one refrigerant has no figure: a part of it would read as all of it', () => {
    const lines = [line('2026-01', 'R-32', 300), line('2026-01', 'R-999', 200, null)];
    expect(lossesByMonth(lines, '2026-01', '2026-01')[0]?.co2eT).toBeNull();
  });

  it('stand on the zero line, and below it where more was taken back than was lost', () => {
    const losses = lossesByMonth([line('2026-01', 'R-32', 300), line('2026-02', 'R-32', -100)], '2026-01', '2026-02');
    const { bars, zeroY } = layOutBars(losses, 1000, { left: 0, width: 200, height: 200 });
    expect(zeroY).toBe(150);
    expect(bars.map(({ y, height }) => [y, height])).toEqual([
      [0, 150],
      [150, 50],
    ]);
  });

  it('are drawn where a month lost next to nothing, and not where it lost nothing', () => {
    const losses = lossesByMonth([line('2026-01', 'R-32', 90_000), line('2026-02', 'R-32', 1)], '2026-01', '2026-03');
    const { bars } = layOutBars(losses, 1000, { left: 0, width: 300, height: 200 });
    expect(bars.map(({ height }) => height)).toEqual([200, 1.5, 0]);
  });
});
