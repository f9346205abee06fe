import { describe, expect, it } from 'vitest';
import { type ChargeBasis, chargeRequest } from '../../../shared/charge/charge.schema.ts';
import type { StoredChargeBasis } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import type { LineSet } from '../../../shared/unit-register/unit.schema.ts';
import { fieldUnits } from './charge-draft.ts';
import { readDraft } from './draft-to-request.ts';
import { draftOfUnit } from './unit-draft.ts';

const lineSet: LineSet = {
  id: 'l',
  unitId: 'u',
  validFrom: '2026-11-30T12:00:00Z',
  note: null,
  branches: [
    {
      name: 'main',
      parent: null,
      liquidOdMm: 9.525,
      gasOdMm: 15.88,
      lengthM: 11.9888,
      riseM: -3,
      bends: 4,
      equivalentMPerBend: 0.5,
      typedLength: { value: '472', unit: 'in' },
      reused: false,
      reuseChecked: false,
    },
    {
      name: 'B',
      parent: 'main',
      liquidOdMm: 6.35,
      gasOdMm: null,
      lengthM: 7.3,
      riseM: 0,
      bends: 0,
      equivalentMPerBend: 0,
      typedLength: null,
      reused: false,
      reuseChecked: false,
    },
  ],
};

const common: Omit<ChargeBasis, 'rate'> = {
  refrigerant: 'R-410A',
  factoryChargeG: 2834.952,
  precharge: { scope: 'system', lengthM: 7.62, allocation: 'largestFirst' },
  metering: 'outdoor',
  allowances: [{ label: 'large indoor unit', gEach: -50.5, count: 2, factor: 1.25 }],
  limits: { minLengthM: 3, maxLengthM: 30.48, maxBranchM: 25, maxRiseM: 15, maxDropM: 8, maxTotalChargeG: 5000 },
  rounding: { toG: 5, direction: 'up' },
  shortLine: 'remove',
};

const RATES: ChargeBasis['rate'][] = [
  { kind: 'flat', gPerM: 55.806 },
  {
    kind: 'byLiquidPipe',
    sizes: [
      { liquidOdMm: 6.35, gPerM: 25.1 },
      { liquidOdMm: 9.52, gPerM: 55.8 },
    ],
  },
  {
    kind: 'stepped',
    steps: [
      { upToM: 10, extraG: -20 },
      { upToM: 30.48, extraG: 200 },
    ],
  },
  { kind: 'formula', expression: 'max(0, L - Lp) * 20' },
  { kind: 'fixedMass', extraG: 130 },
];

describe('A form filled from what is on record', () => {
  it.each(RATES.flatMap((rate) => (['m', 'ft'] as const).map((length) => ({ rate, length, kind: rate.kind }))))(
    'asks for the very basis and line set: rate $kind, shown in $length',
    ({ rate, length }) => {
      const asks = rate.kind !== 'stepped' && rate.kind !== 'fixedMass';
      const basis: ChargeBasis = { ...common, rate, precharge: asks ? common.precharge : null };
      const stored: StoredChargeBasis = {
        id: 'b',
        unitId: 'u',
        validFrom: '2026-11-30T12:00:00Z',
        basis,
        manual: { document: 'Installation manual', page: '14' },
        note: null,
      };
      const units = fieldUnits({ mass: length === 'ft' ? 'lbOz' : 'g', length });
      const draft = draftOfUnit({ refrigerant: 'R-410A', basis: stored, lineSet }, units, 'AR4', 'en-US');

      const { request, missing, unreadable } = readDraft(draft, 'en-US');

      expect([missing, unreadable]).toEqual([[], []]);
      // 472 in, as it is kept, is shown as the tape was read.
      expect(draft.pipes[0]?.length.text).toBe('39ft 4in');
      expect(chargeRequest.parse(request).basis).toEqual(basis);
      expect(request?.lineSet.branches).toEqual([
        {
          name: 'main',
          parent: null,
          liquidOdMm: 9.52, // the nominal that 9.525 mm is
          gasOdMm: 15.88,
          lengthM: 11.9888,
          riseM: -3,
          bends: 4,
          equivalentMPerBend: 0.5,
        },
        {
          name: 'B',
          parent: 'main',
          liquidOdMm: 6.35,
          gasOdMm: null,
          lengthM: 7.3,
          riseM: 0,
          bends: null,
          equivalentMPerBend: null,
        },
      ]);
    },
  );

  it('leaves open what is not recorded, and takes nothing as zero', () => {
    const units = fieldUnits({ mass: 'g', length: 'm' });
    const draft = draftOfUnit({ refrigerant: 'R-32', basis: null, lineSet: null }, units, 'AR4', 'en-GB');
    expect(readDraft(draft, 'en-GB').missing).toEqual([
      '/basis/factoryChargeG',
      '/lineSet/branches/0/liquidOdMm',
      '/lineSet/branches/0/lengthM',
      '/basis/precharge/lengthM',
      '/basis/rate/gPerM',
    ]);
  });
});
