import { describe, expect, it } from 'vitest';
import { flagChanges, flagsAfterStep, type LedgerFlag } from './flag.ts';
import { g, place } from './judged-group-builder.ts';

const flag = (over: Partial<LedgerFlag> = {}): LedgerFlag => ({
  code: 'cylinderNotExplained',
  place: place('C1'),
  groupId: 'a',
  refrigerant: null,
  massMicrograms: g(-90),
  standing: false,
  figures: {},
  ...over,
});
const mixed = flag({ code: 'cylinderMixed', massMicrograms: null, standing: true });

describe('open flags', () => {
  it('of earlier groups stay open over a step; what merely stood is taken from the new state', () => {
    const next = flag({ groupId: 'b' });
    expect(flagsAfterStep([flag(), mixed], { flags: [next], state: { standing: [] } })).toEqual([flag(), next]);
    expect(flagsAfterStep([flag()], { flags: [], state: { standing: [mixed] } })).toEqual([flag(), mixed]);
  });
  it('are opened, changed and closed by what differs, not by what is the same', () => {
    const smaller = flag({ massMicrograms: g(-50) });
    const other = flag({ groupId: 'b' });
    expect(flagChanges([flag(), mixed], [smaller, other])).toEqual({
      opened: [other],
      changed: [smaller],
      closed: [mixed],
    });
    expect(flagChanges([flag(), mixed], [mixed, flag()])).toEqual({ opened: [], changed: [], closed: [] });
  });
  it('change where a further figure does', () => {
    const before = flag({ figures: { fullChargeMicrograms: g(1_290) } });
    const after = flag({ figures: { fullChargeMicrograms: g(1_340) } });
    expect(flagChanges([before], [after]).changed).toEqual([after]);
  });
});
