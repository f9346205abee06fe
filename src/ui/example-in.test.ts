import { describe, expect, it } from 'vitest';
import { exampleIn } from './example-in.ts';

// Factors: 1 oz = 28.349523125 g, 1 ft = 0.3048 m (NIST SP 811, appendix B.8).
describe('an example in a blank', () => {
  it('is said in the unit that the blank reads', () => {
    expect(exampleIn('mass', '28 g', 'oz', 'en-US')).toBe('0.99\u00a0oz');
    expect(exampleIn('mass', '1.2 kg', 'lb', 'en-US')).toBe('2.6\u00a0lb');
    expect(exampleIn('length', '7.5 m', 'ft', 'en-US')).toBe('25\u00a0ft');
    expect(exampleIn('massPerLength', '20 g/m', 'oz/ft', 'en-US')).toBe('0.22\u00a0oz/ft');
  });

  it('stays as it was written where the unit is the same', () => {
    expect(exampleIn('mass', '250 g', 'g', 'en-US')).toBe('250 g');
    expect(exampleIn('length', '39ft 4in', 'ft', 'en-US')).toBe('39ft 4in');
  });

  it('has the decimal mark of the reader', () => {
    expect(exampleIn('mass', '1.29 kg', 'kg', 'es-ES')).toBe('1,29\u00a0kg');
    expect(exampleIn('mass', '1.2 kg', 'lb', 'es-ES')).toBe('2,6\u00a0lb');
  });
});
