import type { CylinderStatement } from '../../../shared/statements/cylinder-statement.schema.ts';
import type { Formats } from '../../lib/format.ts';
import type { Translate } from '../../lib/messages.ts';
import type { BeamSpec } from '../../ui/beam/beam-spec.ts';
import type { BeamUnit } from '../../ui/beam/presets.ts';

interface Words {
  t: Translate;
  format: Formats;
}

/**
 * The last reading against the book, drawn so near that the scales' own uncertainty can be seen: the book as a mark in
 * its band of twice the uncertainty, the poise where the scale stood, and what lies between.
 */
export function differenceBeam(
  { lastReading, difference }: CylinderStatement,
  { t, format }: Words,
  { gramsPer, unit }: BeamUnit,
): BeamSpec | null {
  if (!lastReading || !difference) return null;
  const { expectedG } = lastReading;
  const { differenceG, twoUG } = difference;
  const reach = Math.max(Math.abs(differenceG) * 1.25, twoUG * 2.2, 1);
  const [least, most] = differenceG < 0 ? [-reach, reach * 0.45] : [-reach * 0.45, reach];
  const at = (offsetG: number) => (expectedG + Math.max(least, Math.min(most, offsetG))) / gramsPer;
  const scaleG = expectedG + differenceG;
  const isWithin = difference.verdict === 'withinScales';
  return {
    domain: [at(least), at(most)],
    unit,
    segments:
      differenceG === 0
        ? []
        : [
            {
              from: at(Math.min(0, differenceG)),
              to: at(Math.max(0, differenceG)),
              kind: isWithin ? 'free' : differenceG < 0 ? 'gone' : 'rest',
              label: t(differenceG < 0 ? 'statement.less' : 'statement.more', {
                mass: format.mass(Math.abs(differenceG)),
              }),
            },
          ],
    poise: { at: at(differenceG), label: t('statement.onScale', { mass: format.mass(scaleG) }), kind: 'rest' },
    marks: [{ at: at(0), label: t('statement.byBook', { mass: format.mass(expectedG) }), kind: 'target' }],
    band: { from: at(-twoUG), to: at(twoUG) },
  };
}
