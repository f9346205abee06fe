import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { GroupView } from '../../../shared/entries/entry.schema.ts';
import type { MassUnit } from '../../../shared/units/factors.ts';
import type { TypedMass } from '../../../shared/units/mass.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { errorAt, type FormError } from '../../api/form-errors.ts';
import { peopleQueries } from '../../api/people.ts';
import { usePermission } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { SelectField, TextField } from '../../ui/field.tsx';
import { type QuantityDraft, quantityOfTyped, readQuantity } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { type GroupRequest, massOfReadings, replacementRequest, type SimpleGroup } from './replacement.ts';

export interface ReplacementDraft {
  groupId: string;
  entryId: string;
  readingIds: string[];
  cylinderId: string;
  mass: QuantityDraft<'mass'>;
  readings: QuantityDraft<'mass'>[];
  /** Asked for where the right posting needs one of its own (past a limit, a second refrigerant). */
  reason: string;
}

const MASS_UNITS: readonly ('g' | 'kg' | 'oz' | 'lb')[] = ['g', 'kg', 'oz', 'lb'];

/** The original as it stands, to be changed where it was mistaken. */
export function emptyReplacement({ entry, cylinderId, readings }: SimpleGroup, locale: string): ReplacementDraft {
  const draftOf = (value: string, unit: string) => quantityOfTyped('mass', { value, unit: unit as MassUnit }, locale);
  return {
    groupId: newId(),
    entryId: newId(),
    readingIds: readings.map(() => newId()),
    cylinderId,
    mass: draftOf(entry.typed?.value ?? String(entry.massG), entry.typed?.unit ?? 'g'),
    readings: readings.map(({ value, unit }) => draftOf(value, unit)),
    reason: '',
  };
}

export type ReplacementResult =
  | { is: 'none' }
  | { is: 'ready'; request: GroupRequest; massG: number }
  | { is: 'wrong'; pointer: string; message: string };

/** What the fields come to: the right group as a request, or what is wrong with it and where. */
export function useReplacement(
  group: GroupView,
  simple: SimpleGroup | null,
  draft: ReplacementDraft | null,
): ReplacementResult {
  const t = useMessages();
  const { locale } = usePreferences();
  const seesPeople = usePermission('people:read');
  const readings = useQuery({
    ...cylinderQueries.readings(simple?.cylinderId ?? ''),
    enabled: draft !== null && simple !== null && simple.readings.length > 0,
  });
  const people = useQuery({
    ...peopleQueries.everybody(),
    enabled: draft !== null && seesPeople && group.supervisedByName !== null,
  });
  return useMemo(() => {
    if (!simple || !draft) return { is: 'none' };
    return judge(t, locale, group, simple, draft, {
      toolIdOf: (readingId) => readings.data?.find(({ id }) => id === readingId)?.toolId ?? null,
      supervisedBy: people.data?.find(({ name }) => name === group.supervisedByName)?.id ?? null,
    });
  }, [t, locale, group, simple, draft, readings.data, people.data]);
}

function judge(
  t: Translate,
  locale: string,
  group: GroupView,
  simple: SimpleGroup,
  draft: ReplacementDraft,
  known: Parameters<typeof replacementRequest>[3],
): ReplacementResult {
  const typed: TypedMass[] = [];
  for (const [index, field] of draft.readings.entries()) {
    const reading = readQuantity('mass', field, { locale, allowNegative: true });
    if (reading.is !== 'read') {
      return { is: 'wrong', pointer: `/replacement/readings/${index}`, message: t('log.replace.readingNeeded') };
    }
    typed.push(reading.typed);
  }
  const moments = simple.readings.map(({ moment }, index) => ({ moment, typed: typed[index] as TypedMass }));
  const hoseG = simple.readings.find(({ hoseFull }) => hoseFull)?.hoseG ?? null;
  const byReadings = simple.weighed
    ? massOfReadings(simple, moments, hoseG === null ? null : { value: String(hoseG), unit: 'g' })
    : null;
  let mass: TypedMass;
  if (byReadings) {
    if (byReadings.sign !== 1) {
      return { is: 'wrong', pointer: '/replacement/readings/1', message: t('log.replace.notPositive') };
    }
    mass = { value: byReadings.value, unit: byReadings.unit };
  } else {
    const reading = readQuantity('mass', draft.mass, { locale });
    if (reading.is !== 'read' || !(reading.base > 0)) {
      return { is: 'wrong', pointer: '/replacement/entries/0/mass', message: t('log.replace.massNeeded') };
    }
    mass = reading.typed;
  }
  const request = replacementRequest(group, simple, { ...draft, mass, readings: typed }, known);
  if (nothingDiffers(simple, draft.cylinderId, mass, typed)) {
    return { is: 'wrong', pointer: '/replacement/entries/0/mass', message: t('log.replace.same') };
  }
  return { is: 'ready', request, massG: gramsOf(mass) };
}

const GRAMS: Record<string, number> = { g: 1, kg: 1000, oz: 28.349523125, lb: 453.59237 };
const gramsOf = ({ value, unit }: TypedMass) => Number(value) * (GRAMS[unit] ?? 1);

function nothingDiffers(
  { entry, cylinderId, readings }: SimpleGroup,
  nowId: string,
  mass: TypedMass,
  typed: readonly TypedMass[],
): boolean {
  const sameReadings = readings.every(
    ({ value, unit }, index) => typed[index]?.value === value && typed[index]?.unit === unit,
  );
  return nowId === cylinderId && sameReadings && mass.value === entry.typed?.value && mass.unit === entry.typed.unit;
}

export function ReplacementFields({
  group,
  simple,
  draft,
  result,
  errors,
  onChange,
}: {
  group: GroupView;
  simple: SimpleGroup;
  draft: ReplacementDraft;
  result: ReplacementResult;
  errors: readonly FormError[];
  onChange: (draft: ReplacementDraft) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const cylinders = useQuery(cylinderQueries.choice());
  const choices = cylinders.data?.items.map(({ id, tag, refrigerant }) => ({
    value: id,
    label: `${tag}, ${refrigerant}`,
  })) ?? [{ value: simple.cylinderId, label: group.readings[0]?.cylinderTag ?? '' }];
  const reasonError = errorAt(errors, '/replacement/reason');
  return (
    <fieldset className="flex flex-col gap-1 border-l-4 border-rest pl-3">
      <legend className="sr-only">{t('log.reverse.withReplacement')}</legend>
      <SelectField
        layout="row"
        label={t('log.replace.cylinder')}
        choices={choices}
        value={draft.cylinderId}
        onChange={(event) => onChange({ ...draft, cylinderId: event.target.value })}
      />
      {simple.readings.map((reading, index) => (
        <QuantityInput
          key={reading.id}
          kind="mass"
          label={t(`log.replace.reading.${reading.moment}`)}
          units={MASS_UNITS}
          allowNegative={reading.mode === 'zeroed'}
          draft={draft.readings[index] as QuantityDraft<'mass'>}
          error={errorAt(errors, `/replacement/readings/${index}`)}
          onChange={(changed) =>
            onChange({ ...draft, readings: draft.readings.map((each, at) => (at === index ? changed : each)) })
          }
        />
      ))}
      {simple.weighed ? (
        <p className="py-1 text-right font-[600]" aria-live="polite">
          {result.is === 'ready' ? t('log.replace.weighed', { mass: format.mass(result.massG) }) : '\u00a0'}
        </p>
      ) : (
        <QuantityInput
          kind="mass"
          label={t('log.replace.mass')}
          units={MASS_UNITS}
          draft={draft.mass}
          error={errorAt(errors, '/replacement/entries/0/mass')}
          onChange={(mass) => onChange({ ...draft, mass })}
        />
      )}
      {simple.weighed && errorAt(errors, '/replacement/entries/0/mass') ? (
        <p role="alert" className="border-l-4 border-ink pl-2.5 text-[0.9375rem] font-[600]">
          {errorAt(errors, '/replacement/entries/0/mass')}
        </p>
      ) : null}
      {reasonError || draft.reason !== '' ? (
        <TextField
          label={t('log.replace.reason')}
          value={draft.reason}
          maxLength={1000}
          error={reasonError}
          onChange={(event) => onChange({ ...draft, reason: event.target.value })}
        />
      ) : null}
    </fieldset>
  );
}
