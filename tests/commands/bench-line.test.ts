import { describe, expect, it } from 'vitest';
import { type Figure, toLine } from '../bench/bench.ts';

const figure = (changes: Partial<Figure>): Figure => ({
  name: 'posting',
  value: 300,
  unit: 'entries/s',
  against: 1000,
  bar: { atLeast: 0.25 },
  ...changes,
});

describe('A bench line', () => {
  it('has the keys that its readers know, in their order', () => {
    expect(JSON.stringify(toLine(figure({})))).toBe(
      '{"name":"posting","value":300,"unit":"entries/s","against":1000,"ratio":0.3,"bar":0.25,"holds":true}',
    );
  });

  it('judges the ratio where there is a bare thing, and the value where there is none', () => {
    expect(toLine(figure({ value: 200 }))).toMatchObject({ ratio: 0.2, holds: false });
    expect(toLine(figure({ value: 250 }))).toMatchObject({ ratio: 0.25, holds: true });
    expect(toLine(figure({ against: null, bar: { atMost: 300 } }))).toMatchObject({ ratio: null, holds: true });
    expect(toLine(figure({ against: null, bar: { atMost: 299 } }))).toMatchObject({ bar: 299, holds: false });
  });

  it('judges the exact ratio and not the printed one', () => {
    expect(toLine(figure({ value: 249.9999999 }))).toMatchObject({ ratio: 0.25, holds: false });
  });

  it('never says that nothing measured holds', () => {
    expect(toLine(figure({ value: Number.NaN })).holds).toBe(false);
    expect(toLine(figure({ value: 0, against: 0, bar: { atMost: 1 } })).holds).toBe(false);
  });
});
