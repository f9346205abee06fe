import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { Formats } from '../../lib/format.ts';
import type { Translate } from '../../lib/messages.ts';
import type { BeamSpec } from '../../ui/beam/beam-spec.ts';
import { type BeamUnit, cylinderBeam } from '../../ui/beam/presets.ts';

type Weighed = Pick<Cylinder, 'tareG' | 'contentG' | 'limitG'>;

/** Past its limit: the book holds more than the cylinder may. */
export const isOverLimit = ({ contentG, limitG }: Pick<Cylinder, 'contentG' | 'limitG'>): boolean =>
  limitG !== null && contentG > limitG;

/** Nearly full: less than a twentieth of the limit is left. */
export const isNearLimit = ({ contentG, limitG }: Pick<Cylinder, 'contentG' | 'limitG'>): boolean =>
  limitG !== null && contentG <= limitG && contentG > 0.95 * limitG;

interface Words {
  t: Translate;
  format: Formats;
}

/** As it stands on the scale, each part named: tare, heel, contents, and where its fill limit is. */
export function fullCylinderBeam(
  { tareG, contentG, limitG }: Weighed,
  heelG: number | null,
  { t, format }: Words,
  unit: BeamUnit,
): BeamSpec {
  const label = (key: string, massG: number) => ({ massG, label: t(key, { mass: format.massAbout(massG) }) });
  const heel = heelG !== null && contentG > 0 ? Math.min(heelG, contentG) : 0;
  return cylinderBeam(
    {
      tare: label('cylinders.beam.tare', tareG),
      heel: heel > 0 ? label('cylinders.beam.heel', heel) : null,
      contents: {
        massG: contentG,
        label:
          heel > 0
            ? t('cylinders.beam.beyondHeel', { mass: format.massAbout(contentG - heel) })
            : t('cylinders.beam.contents', { mass: format.massAbout(contentG) }),
      },
      fillLimit: limitG === null ? null : label('cylinders.beam.fillLimitGross', tareG + limitG),
      gross: label('cylinders.beam.gross', tareG + contentG),
    },
    unit,
  );
}

/** In a list: the same to scale, with the limit alone named; figures and names stand in the columns. */
export function smallCylinderBeam(
  { tareG, contentG, limitG }: Weighed,
  { t, format }: Words,
  unit: BeamUnit,
): BeamSpec {
  return cylinderBeam(
    {
      tare: { massG: tareG, label: '' },
      contents: { massG: contentG, label: '' },
      fillLimit:
        limitG === null
          ? null
          : // On a scale that begins with the tare, the limit is what the scale may show.
            { massG: tareG + limitG, label: t('cylinders.beam.fillLimit', { mass: format.massAbout(tareG + limitG) }) },
      gross: { massG: tareG + contentG, label: '' },
    },
    unit,
  );
}

/** The drawing in one sentence. */
export function beamSummary({ tag, tareG, contentG, limitG }: Weighed & Pick<Cylinder, 'tag'>, { t, format }: Words) {
  const figures = { tag, tare: format.massAbout(tareG), content: format.massAbout(contentG) };
  return limitG === null
    ? t('cylinders.beam.summaryNoLimit', figures)
    : t('cylinders.beam.summary', { ...figures, limit: format.massAbout(limitG) });
}
