import { useQuery } from '@tanstack/react-query';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { SelectField } from '../../ui/field.tsx';
import { type QuantityDraft, quantityOf } from '../../ui/quantity-draft.ts';
import { fieldUnits } from './charge-draft.ts';

/** A cylinder of this refrigerant: the person's own van first. Its last reading says where the scale starts. */
export function CylinderChoice({
  refrigerant,
  personId,
  cylinderId,
  onChoose,
}: {
  refrigerant: string;
  personId: string;
  cylinderId: string;
  onChoose: (cylinderId: string, gross: QuantityDraft<'mass'> | null) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const { data } = useQuery({ ...cylinderQueries.choice({ refrigerant }), enabled: refrigerant !== '' });
  const cylinders = data?.items.filter(canCharge) ?? [];
  const choices = (own: boolean) =>
    cylinders
      .filter((cylinder) => (cylinder.heldBy === personId) === own)
      .map((cylinder) => ({
        value: cylinder.id,
        label: t('chargeScreen.unit.cylinderChoice', { tag: cylinder.tag, mass: format.mass(cylinder.contentG) }),
      }));
  const groups = [
    { label: t('chargeScreen.unit.ownCylinders'), choices: choices(true) },
    { label: t('chargeScreen.unit.otherCylinders'), choices: choices(false) },
  ].filter((group) => group.choices.length > 0);
  return (
    <SelectField
      layout="row"
      label={t('chargeScreen.cylinder')}
      placeholder={t('chargeScreen.unit.noCylinder')}
      groups={groups}
      value={cylinders.some((cylinder) => cylinder.id === cylinderId) ? cylinderId : ''}
      onChange={(event) => {
        const chosen = cylinders.find((cylinder) => cylinder.id === event.target.value);
        const grossG = chosen ? (chosen.lastReadingGrossG ?? chosen.tareG + chosen.contentG) : null;
        const unit = fieldUnits(preferences).mass;
        onChoose(
          event.target.value,
          grossG === null ? null : quantityOf('mass', Math.round(grossG * 1000) / 1000, unit, preferences.locale),
        );
      }}
    />
  );
}

/** A recovery cylinder, a mixed one or one that does not bear what is in it is nothing to charge from. */
const canCharge = (cylinder: Cylinder) =>
  cylinder.kind !== 'recovery' && !cylinder.mixed && cylinder.pressureRatingHolds !== false && cylinder.contentG > 0;
