import { describe, expect, it } from 'vitest';
import { readNumber } from './read-number.ts';

const number = (value: string) => ({ is: 'number', value });

describe('A typed number', () => {
  it.each([
    ['12', '12'],
    ['7.5', '7.5'],
    ['7,5', '7.5'],
    ['7.50', '7.50'],
    ['.5', '0.5'],
    ['007', '7'],
    ['0.125', '0.125'],
    ['0,125', '0.125'],
    [',125', '0.125'],
    ['1250.125', '1250.125'],
    ['1,250.5', '1250.5'],
    ['1.250,5', '1250.5'],
    ['1,250.125', '1250.125'],
    ['1.250,125', '1250.125'],
    ['1,250,000', '1250000'],
    ['1.250.000', '1250000'],
    ['1 250', '1250'],
    ['1\u202f250,5', '1250.5'],
    ['1\u00a0250,125', '1250.125'],
    ['1,2500', '1.2500'],
    ['1,25', '1.25'],
  ])('%s is %s', (text, value) => {
    expect(readNumber(text)).toEqual(number(value));
  });

  it.each(['1,250', '1.250', '12.345', '999,999'])('%s may be thousands or decimals, and is asked', (text) => {
    const [whole, part] = text.split(/[.,]/);
    expect(readNumber(text)).toEqual({ is: 'ambiguous', decimal: `${whole}.${part}`, grouped: `${whole}${part}` });
    expect(readNumber(text, 'decimal')).toEqual(number(`${whole}.${part}`));
    expect(readNumber(text, 'grouping')).toEqual(number(`${whole}${part}`));
  });

  it.each([
    '',
    'abc',
    '1,25.5',
    '1.2.3',
    '1,250,00',
    '12.',
    '1 25',
    '1 250.500,5',
    '1,250.125,5',
    '0,250,000',
    '1e5',
    '--1',
    '1234567890123',
  ])('%j is none', (text) => {
    expect(readNumber(text)).toEqual({ is: 'none' });
  });
});
