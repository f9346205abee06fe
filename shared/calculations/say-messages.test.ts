import { expect, it } from 'vitest';
import { sayMessages } from './say-messages.ts';

it('turns codes with their values into sentences, and leaves everything else alone', () => {
  const result = {
    maxNetG: 10,
    cautions: [{ code: 'flammable', signal: 'warning', params: { refrigerant: 'R-32' } }],
    warnings: [{ code: 'rateTooLow', params: {} }],
    policies: [],
    steps: [{ code: 'untouched', params: {} }],
  };
  expect(sayMessages(result, (key, params) => `${key} ${JSON.stringify(params)}`)).toEqual({
    maxNetG: 10,
    cautions: [{ code: 'flammable', signal: 'warning', message: 'caution.flammable {"refrigerant":"R-32"}' }],
    warnings: [{ code: 'rateTooLow', message: 'warning.rateTooLow {}' }],
    policies: [],
    steps: [{ code: 'untouched', params: {} }],
  });
});
