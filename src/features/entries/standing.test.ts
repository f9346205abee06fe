import { describe, expect, it } from 'vitest';
import { cylinder, entryRow, idOf, nowhere, unit } from './entry-row.fixture.ts';
import { standingAround, standingBeam, standingByReadings } from './standing.ts';

const at = (day: number) => `2026-11-${String(day).padStart(2, '0')}T12:00:00.000Z`;
const bought = entryRow({
  sequence: 10,
  from: { place: 'supplier', id: 's', as: null, label: 'Tolland Supply' },
  to: cylinder('7741'),
  massG: 11_340,
  occurredAt: at(1),
});
const gap = entryRow({
  sequence: 20,
  groupId: 'charge',
  from: cylinder('7741'),
  to: nowhere('supplierShortFill'),
  massG: 25,
  addedByServer: true,
  occurredAt: at(5),
});
const charge = entryRow({ sequence: 21, groupId: 'charge', massG: 90, occurredAt: at(5) });
/** Posted later, but it happened before. */
const late = entryRow({ sequence: 40, massG: 100, occurredAt: at(3) });
const afterwards = entryRow({ sequence: 30, massG: 500, occurredAt: at(9) });

describe('What a place held around a group', () => {
  it('is the sum of what had happened to it by then, by its own time and not by when it was recorded', () => {
    expect(standingAround(idOf('cylinder', '7741'), [charge], [bought, charge, late, afterwards])).toEqual({
      beforeG: 11_240,
      afterG: 11_150,
    });
  });

  it('starts after the gap that the reading showed', () => {
    expect(standingAround(idOf('cylinder', '7741'), [gap, charge], [bought, gap, charge])).toEqual({
      beforeG: 11_315,
      afterG: 11_225,
    });
  });

  it('shows as lost what the book held and the recovery did not find', () => {
    const factory = entryRow({
      sequence: 1,
      from: nowhere('factory'),
      to: unit('0187'),
      massG: 2450,
      occurredAt: at(1),
    });
    const recovery = entryRow({
      sequence: 50,
      groupId: 'recovery',
      from: unit('0187'),
      to: cylinder('R-09'),
      massG: 2310,
      occurredAt: at(8),
    });
    const lost = entryRow({
      sequence: 51,
      groupId: 'recovery',
      from: unit('0187'),
      to: nowhere('atmosphere', 'inferred'),
      massG: 140,
      addedByServer: true,
      occurredAt: at(8),
    });
    const standing = standingAround(idOf('unit', '0187'), [recovery, lost], [factory, recovery, lost]);
    expect(standing).toEqual({ beforeG: 2450, afterG: 0, lostG: 140 });
    const labels = { before: 'before', after: 'after', lost: 'lost', limit: null, limitKind: 'target' as const };
    const beam = standingBeam(standing ?? { beforeG: 0, afterG: 0 }, labels, { gramsPer: 1, unit: 'g' });
    expect(beam.segments).toEqual([
      { from: 0, to: 2310, kind: 'move', label: 'before' },
      { from: 2310, to: 2450, kind: 'gone', label: 'lost' },
    ]);
    expect(beam.poise).toMatchObject({ at: 0 });
  });

  it('carries no binary noise: 0.1 and 0.2 leave 0.3', () => {
    const parts = [0.1, 0.2].map((massG, index) =>
      entryRow({ sequence: index, massG, from: nowhere('opening'), to: unit('0412'), occurredAt: at(1) }),
    );
    const empty = entryRow({
      sequence: 9,
      groupId: 'g',
      massG: 0.3,
      from: unit('0412'),
      to: cylinder('R'),
      occurredAt: at(2),
    });
    expect(standingAround(idOf('unit', '0412'), [empty], parts)).toEqual({ beforeG: 0.3, afterG: 0 });
  });

  it('follows from two gross readings where the whole book is not at hand, and from one alone not', () => {
    const reading = (moment: string, massG: number) => ({ moment, mode: 'gross', massG });
    expect(standingByReadings(6120, [reading('before', 6120), reading('after', 8430)])).toEqual({
      beforeG: 0,
      afterG: 2310,
    });
    expect(standingByReadings(6120, [reading('only', 8430)])).toBeNull();
  });
});
