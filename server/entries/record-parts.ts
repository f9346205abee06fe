import type { EntryRecord, GroupRecord } from '../../shared/journal/record.schema.ts';
import type { AnswerRequest, EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import type { Place } from '../../shared/ledger/place.ts';
import type { Scale } from '../../shared/ledger/scale.ts';
import { microgramsOfTyped } from '../../shared/units/mass.ts';
import { decimalOf } from '../journal/register-journal.ts';

export const placeRecord = (place: Place): EntryRecord['from'] => ({
  place: place.place,
  id: 'id' in place ? place.id : null,
  as: 'as' in place ? place.as : null,
});

export const statementRecord = ({
  about,
  id,
  is,
  by,
}: AnswerRequest['statement']): GroupRecord['statements'][number] => ({
  about,
  id,
  is,
  by: by ?? null,
});

export function documentRecord(
  document: NonNullable<EntryGroupRequest['documents']>[number],
): GroupRecord['documents'][number] {
  const { kind, number, date, refrigerant, mass } = document;
  return {
    kind,
    number,
    date,
    refrigerant: refrigerant ?? null,
    massMicrograms: mass ? String(microgramsOfTyped(mass)) : null,
    typed: mass ? { value: mass.value, unit: mass.unit } : null,
  };
}

/** Nothing where none was told. */
export const recoveryLevelRecord = (told: EntryGroupRequest['recoveryLevel']): Pick<GroupRecord, 'recoveryLevel'> => {
  if (!told) return {};
  const { required, reached = null, exception = null, clause } = told;
  return { recoveryLevel: { required, reached, exception, clause } };
};

/** A reading with the accuracy of the very scale on that day; without a tool none. */
export function readingRecord(
  reading: NonNullable<EntryGroupRequest['readings']>[number],
  scales: ReadonlyMap<string, Scale>,
): GroupRecord['readings'][number] {
  const scale = reading.toolId ? scales.get(reading.toolId) : undefined;
  const { value, unit, hose } = reading;
  return {
    id: reading.id,
    cylinderId: reading.cylinderId,
    toolId: reading.toolId ?? null,
    at: reading.at ? new Date(reading.at).toISOString() : null,
    moment: reading.moment,
    mode: reading.mode,
    value,
    unit,
    massMicrograms: String(microgramsOfTyped({ value, unit })),
    hoseFull: reading.hoseFull ?? null,
    hose: hose ? { value: hose.value, unit: hose.unit } : null,
    hoseMicrograms: hose ? String(microgramsOfTyped(hose)) : null,
    scale: scale
      ? {
          resolutionG: decimalOf(scale.resolutionG),
          repeatabilityG: decimalOf(scale.repeatabilityG),
          spanErrorRelative: decimalOf(scale.spanErrorRelative),
          offsetG: decimalOf(scale.offsetG),
        }
      : null,
  };
}
