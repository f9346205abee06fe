import { describe, expect, it } from 'vitest';
import { referenceData } from '../reference/reference-data.fixture.ts';
import { findJointTorque } from './find-joint-torque.ts';
import { jointTorqueFixtures } from './joint-torque.fixtures.ts';
import { jointTorqueRequest } from './joint-torque.schema.ts';

describe('The general torque of a flare joint', () => {
  it.each(jointTorqueFixtures)('of $name ($source)', ({ request, result }) => {
    expect(findJointTorque(jointTorqueRequest.parse(request), referenceData)).toEqual({ ok: true, value: result });
  });

  it('takes every print of a size: 9.5, 9.52 and 9.525 mm are 3/8 in', () => {
    for (const odMm of [9.5, 9.52, 9.525]) {
      expect(findJointTorque({ odMm }, referenceData)).toMatchObject({ value: { minNm: 32.7, maxNm: 39.9 } });
    }
  });

  it('is refused for a diameter that has none, with those that do', () => {
    for (const odMm of [8, 22.22, 10]) {
      expect(findJointTorque({ odMm }, referenceData)).toMatchObject({
        ok: false,
        refusals: [{ code: 'noGeneralTorque', path: '/odMm', given: odMm, allowed: [6.35, 9.52, 12.7, 15.88, 19.05] }],
      });
    }
  });
});
