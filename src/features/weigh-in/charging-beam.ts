import { MASS_FACTORS } from '../../../shared/units/factors.ts';
import type { BeamSpec } from '../../ui/beam/beam-spec.ts';
import { type BeamUnit, weighInBeam } from '../../ui/beam/presets.ts';
import type { Stop } from './leg-figures.ts';
import type { ReadingUnit } from './scale-reading.ts';

/** The ticks count what the scale counts, pounds and ounces as it shows them. */
export function beamUnitOf(unit: ReadingUnit): BeamUnit {
  return { gramsPer: MASS_FACTORS[unit === 'lbOz' ? 'oz' : unit].perUnit.valueOf(), unit };
}

interface Charging {
  startG: number;
  droppedG: number;
  stop: Stop | null;
  labels: { start: string; now: string; stop: string };
  unit: ReadingUnit;
}

/** From the start towards the stop; without a target from the start to where it has come. */
export function chargingBeam({ startG, droppedG, stop, labels, unit }: Charging): BeamSpec {
  const nowG = startG - droppedG;
  if (stop && stop.scaleG !== null) {
    return weighInBeam(
      {
        start: { massG: startG, label: labels.start },
        now: { massG: nowG, label: labels.now },
        stop: { massG: stop.scaleG, label: labels.stop },
        toleranceG: stop.toleranceG,
        gone: '',
      },
      beamUnitOf(unit),
    );
  }
  const { gramsPer, unit: name } = beamUnitOf(unit);
  const span = Math.max(droppedG * 1.3, 50);
  return {
    domain: [(startG + span * 0.04) / gramsPer, (startG - span) / gramsPer],
    unit: name,
    segments: droppedG > 0 ? [{ from: startG / gramsPer, to: nowG / gramsPer, kind: 'move', label: '' }] : [],
    poise: { at: nowG / gramsPer, label: labels.now, kind: 'move' },
    marks: [{ at: startG / gramsPer, label: labels.start, kind: 'note' }],
  };
}
