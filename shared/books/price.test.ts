import { describe, expect, it } from 'vitest';
import { microsPerKg } from './price.ts';

describe('A price', () => {
  it('a kilogram is kept to the millionth', () => {
    expect(microsPerKg({ value: '18.5', per: 'kg' })).toBe(18_500_000n);
    expect(microsPerKg({ value: '0.000001', per: 'kg' })).toBe(1n);
  });

  it('a pound is converted by the exact pound, 0.45359237 kg', () => {
    // 9.99 / 0.45359237 = 22.02418...
    expect(microsPerKg({ value: '9.99', per: 'lb' })).toBe(22_024_180n);
  });
});
