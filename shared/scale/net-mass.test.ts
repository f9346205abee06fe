import { describe, expect, it } from 'vitest';
import { requireValue } from '../reference/reference-data.fixture.ts';
import { netMassRequest } from './net-mass.schema.ts';
import { netMass } from './net-mass.ts';
import { netMassFixtures } from './scale.fixtures.ts';

describe('A net mass', () => {
  it.each(netMassFixtures)('$name ($source)', ({ request, result }) => {
    expect(netMass(netMassRequest.parse(request))).toEqual({ ok: true, value: result });
  });

  it('with repeatability alone is uncertain by 6.976 g (d 5 g, s 2 g)', () => {
    const { expandedUncertaintyG } = requireValue(
      netMass({ beforeG: 2350, afterG: 0, resolutionG: 5, repeatabilityG: 2 }),
    );
    expect(expandedUncertaintyG).toBe(6.976);
  });

  it('on a scale of half an ounce is uncertain by 11.57 g: 26 % of an addition of 45 g', () => {
    const { expandedUncertaintyG } = requireValue(netMass({ beforeG: 45, afterG: 0, resolutionG: 14.1747615625 }));
    expect(expandedUncertaintyG).toBeCloseTo(11.57, 2);
    expect(expandedUncertaintyG / 45).toBeCloseTo(0.26, 2);
  });

  it('is as uncertain on a zeroed scale, which is rounded twice as well', () => {
    const zeroed = requireValue(netMass({ beforeG: 0, afterG: -90, resolutionG: 5 }));
    expect(zeroed).toEqual(requireValue(netMass({ beforeG: 17_105, afterG: 17_015, resolutionG: 5 })));
  });

  it('is free of binary noise', () => {
    expect(requireValue(netMass({ beforeG: 0.3, afterG: 0.1, resolutionG: 0.1 })).netG).toBe(0.2);
  });
});
