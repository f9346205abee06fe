import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import type { Formats } from '../../lib/format.ts';
import type { Translate } from '../../lib/messages.ts';
import { type BeamSpec, roundEnd } from '../../ui/beam/beam-spec.ts';
import type { BeamUnit } from '../../ui/beam/presets.ts';

interface Books {
  unit: Pick<Unit, 'book'>;
  addedG: number;
  /** The whole circuit was empty before. */
  emptied: boolean;
  fullChargeG: number | null;
}

/** The unit's book before and after: what was in it lies at rest, what goes in is on the move, full charge is the mark. */
export function bookBeam(
  { unit, addedG, emptied, fullChargeG }: Books,
  { t, format, unit: { gramsPer, unit: name } }: { t: Translate; format: Formats; unit: BeamUnit },
): { spec: BeamSpec; summary: string } {
  const beforeG = emptied ? 0 : Math.max(unit.book.massG, 0);
  const afterG = beforeG + addedG;
  const known = emptied || unit.book.known;
  const before = t(known ? 'weighIn.beam.bookBefore' : 'weighIn.beam.sumBefore', { mass: format.massAbout(beforeG) });
  const added = t('weighIn.beam.added', { mass: format.massAbout(addedG) });
  const after = t(known ? 'weighIn.beam.bookAfter' : 'weighIn.beam.sumAfter', { mass: format.massAbout(afterG) });
  const full = fullChargeG === null ? null : t('weighIn.beam.full', { mass: format.mass(fullChargeG) });
  return {
    spec: {
      domain: [0, roundEnd((Math.max(afterG, fullChargeG ?? 0, 1) * 1.08) / gramsPer)],
      unit: name,
      segments: [
        ...(beforeG > 0 ? [{ from: 0, to: beforeG / gramsPer, kind: 'rest' as const, label: before }] : []),
        { from: beforeG / gramsPer, to: afterG / gramsPer, kind: 'move', label: added },
      ],
      poise: { at: afterG / gramsPer, label: after, kind: 'move' },
      marks: full === null || fullChargeG === null ? [] : [{ at: fullChargeG / gramsPer, label: full, kind: 'target' }],
    },
    summary: `${[...(beforeG > 0 ? [before] : []), added, after, ...(full ? [full] : [])].join(', ')}.`,
  };
}
