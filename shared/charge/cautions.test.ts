import { describe, expect, it } from 'vitest';
import { charge, pipe } from './charge-request.fixture.ts';

const cautions = (...asked: Parameters<typeof charge>) =>
  charge(...asked).cautions.map(({ code, signal }) => `${signal} ${code}`);
const params = (code: string, ...asked: Parameters<typeof charge>) =>
  charge(...asked).cautions.find((caution) => caution.code === code)?.params;

describe('Cautions', () => {
  it('stand by gravity and name only what the job meets', () => {
    expect(cautions({}, [pipe(12)])).toEqual([
      'warning flammable',
      'caution frostbite',
      'notice noRoomCheck',
      'notice rateForThisRefrigerant',
      'notice manualGoverns',
    ]);
    expect(cautions({ refrigerant: 'R-134a' }, [pipe(5)])).toEqual(['notice manualGoverns']);
  });

  it('call A3 a danger, A2L a warning, B1 and B2L toxic', () => {
    expect(cautions({ refrigerant: 'R-290' })).toContain('danger highlyFlammable');
    expect(cautions({ refrigerant: 'R-454B' })).toContain('warning flammable');
    expect(cautions({ refrigerant: 'R-123' })).toContain('warning toxic');
    expect(cautions({ refrigerant: 'R-717' })).toEqual(expect.arrayContaining(['danger toxic', 'warning flammable']));
  });

  it('ask for a blend as liquid when something is weighed in', () => {
    expect(cautions({ refrigerant: 'R-407C' }, [pipe(12)])).toContain('caution blendAsLiquid');
    expect(cautions({ refrigerant: 'R-407C' }, [pipe(5)])).not.toContain('caution blendAsLiquid');
    expect(cautions({ refrigerant: 'R-32' }, [pipe(12)])).not.toContain('caution blendAsLiquid');
  });

  it('say recover, never vent, and how much', () => {
    expect(params('recoverNeverVent', { shortLine: 'remove' }, [pipe(5)])).toEqual({ recoverG: 50 });
    expect(params('recoverNeverVent', {}, [pipe(5)])).toBeUndefined();
  });

  it('keep the compressor off while a whole charge goes into a vacuum', () => {
    expect(cautions({}, [pipe(12)], { job: 'fullRecharge' })).toContain('warning compressorUnderVacuum');
    expect(cautions({}, [pipe(12)])).not.toContain('warning compressorUnderVacuum');
  });

  it('warn of a rate printed for R-410A where its successors are charged by the metre', () => {
    for (const refrigerant of ['R-32', 'R-454B', 'R-452B']) {
      expect(cautions({ refrigerant })).toContain('notice rateForThisRefrigerant');
    }
    expect(cautions({ refrigerant: 'R-410A' })).not.toContain('notice rateForThisRefrigerant');
    expect(cautions({ precharge: null, rate: { kind: 'fixedMass', extraG: 90 } })).not.toContain(
      'notice rateForThisRefrigerant',
    );
  });
});

/** m1 = 6 m3 x LFL (A2L), 4 m3 x LFL (A2, A3): IEC 60335-2-40:2018 (ed. 6). */
describe('The room check', () => {
  it('is not needed up to 1,842 g of R-32, the bound included', () => {
    const fixed = (extraG: number) => ({ precharge: null, rate: { kind: 'fixedMass' as const, extraG } });
    expect(params('noRoomCheck', fixed(642))).toEqual({ refrigerant: 'R-32', totalG: 1842, m1G: 1842 });
    expect(params('roomCheckNeeded', fixed(642))).toBeUndefined();
    expect(params('roomCheckNeeded', fixed(643))).toEqual({ refrigerant: 'R-32', totalG: 1843, m1G: 1842 });
  });

  it('can be brought about by the line set alone (1.75 kg and 12 m x 20 g/m make 1.99 kg)', () => {
    const basis = { factoryChargeG: 1750, precharge: null };
    expect(params('roomCheckNeeded', basis, [pipe(12)])).toMatchObject({ totalG: 1990 });
    expect(params('noRoomCheck', basis, [pipe(4)])).toMatchObject({ totalG: 1830 });
  });

  it('is to be confirmed where the LFL is from memory (R-454B, 1,776 g)', () => {
    expect(params('noRoomCheckToBeConfirmed', { refrigerant: 'R-454B' })).toMatchObject({ m1G: 1776 });
    expect(params('roomCheckNeededToBeConfirmed', { refrigerant: 'R-454B', factoryChargeG: 1700 })).toMatchObject({
      totalG: 1790,
    });
  });

  it('starts at 152 g of R-290, is left to the code for R-717, and is no matter for A1', () => {
    expect(params('roomCheckNeeded', { refrigerant: 'R-290', factoryChargeG: 100 })).toMatchObject({ m1G: 152 });
    expect(cautions({ refrigerant: 'R-717' })).toContain('warning roomByLocalCode');
    expect(cautions({ refrigerant: 'R-410A' }).join()).not.toMatch(/room/i);
  });
});

describe('CO2 equivalent', () => {
  const tonnes = (refrigerant: string, factoryChargeG: number, gwpSet: 'AR4' | 'AR5' | 'US-AIM' | 'EU-2024-573') =>
    charge({ refrigerant, factoryChargeG }, [pipe(5)], { gwpSet }).co2eT;

  /** Worked values: R-410A 2.35 kg 4.9056 t (AR4 2087.5), 4.5202 t (AR5 1923.5); R-404A 12 kg 47.059 t. */
  it('is kg x GWP of the named set / 1000, blends from their composition', () => {
    expect(tonnes('R-410A', 2350, 'AR4')).toBeCloseTo(4.9056, 4);
    expect(tonnes('R-410A', 2350, 'AR5')).toBeCloseTo(4.5202, 4);
    expect(tonnes('R-404A', 12_000, 'AR4')).toBeCloseTo(47.059, 3);
    expect(tonnes('R-454B', 2834.95, 'US-AIM')).toBeCloseTo(1.3185, 4);
  });

  it('is left out, and said, where the set has no value; the charge stands', () => {
    const r22 = charge({ refrigerant: 'R-22' }, [pipe(12)], { gwpSet: 'EU-2024-573' });
    expect(r22).toMatchObject({ extraG: 90, co2eT: null });
    expect(r22.warnings).toEqual([{ code: 'gwpNotCovered', params: { refrigerant: 'R-22', gwpSet: 'EU-2024-573' } }]);
  });

  it('says which components a set leaves out and which values are to be confirmed', () => {
    const codes = (gwpSet: 'US-AIM' | 'AR4') =>
      charge({ refrigerant: 'R-454B' }, [pipe(12)], { gwpSet }).warnings.map(({ code }) => code);
    expect(codes('US-AIM')).toEqual(['gwpPartly']);
    expect(codes('AR4')).toEqual(['gwpToBeConfirmed']);
  });
});
