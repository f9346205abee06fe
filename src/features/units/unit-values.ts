import type { z } from 'zod';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import type {
  applianceKind,
  createUnitRequest,
  fullChargeMethod,
  subsector,
  Unit,
  updateUnitRequest,
} from '../../../shared/unit-register/unit.schema.ts';
import type { QuantityKind, UnitOf } from '../../../shared/units/quantities.ts';
import { emptyQuantity, type QuantityDraft, quantityOf, readQuantity } from '../../ui/quantity-draft.ts';

export interface SerialValues {
  part: string;
  serial: string;
  model: string;
}

/** What the nameplate and the people on the site say. */
export interface PlateValues {
  tag: string;
  name: string;
  applianceKind: string;
  subsector: string;
  nameplateReadable: boolean;
  serials: SerialValues[];
  designHigh: QuantityDraft<'pressureGauge'>;
  designLow: QuantityDraft<'pressureGauge'>;
  installedOn: string;
}

/** A unit as the form of a new one holds it, with the ids of everything that it makes. */
export interface NewUnitValues extends PlateValues {
  id: string;
  fullChargeId: string;
  entryId: string;
  groupId: string;
  siteId: string;
  refrigerant: string;
  /** A calendar day: from then on the circuit holds this refrigerant and this charge. */
  since: string;
  fullChargeKnown: 'yes' | 'no';
  fullCharge: QuantityDraft<'mass'>;
  method: string;
  initial: 'factory' | 'opening' | 'notKnown';
  initialMass: QuantityDraft<'mass'>;
}

type Reads = Pick<Preferences, 'locale' | 'pressure' | 'mass'>;
export const pressureUnitOf = ({ pressure }: Pick<Preferences, 'pressure'>): UnitOf<'pressureGauge'> =>
  pressure === 'psig' ? 'psi' : pressure;
export const massUnitOf = ({ mass }: Pick<Preferences, 'mass'>): UnitOf<'mass'> => (mass === 'lbOz' ? 'lb' : mass);

export function emptyPlate(preferences: Reads): PlateValues {
  const pressure = emptyQuantity<'pressureGauge'>(pressureUnitOf(preferences));
  return {
    tag: '',
    name: '',
    applianceKind: 'comfortCooling',
    subsector: '',
    nameplateReadable: true,
    serials: [{ part: 'outdoor', serial: '', model: '' }],
    designHigh: pressure,
    designLow: pressure,
    installedOn: '',
  };
}

export function emptyUnit(
  preferences: Reads,
  { newId, today, siteId }: { newId: () => string; today: string; siteId: string },
): NewUnitValues {
  const mass = emptyQuantity<'mass'>(massUnitOf(preferences));
  return {
    ...emptyPlate(preferences),
    id: newId(),
    fullChargeId: newId(),
    entryId: newId(),
    groupId: newId(),
    siteId,
    refrigerant: '',
    since: today,
    fullChargeKnown: 'yes',
    fullCharge: mass,
    method: 'manufacturer',
    initial: 'factory',
    initialMass: mass,
  };
}

export function plateOf(unit: Unit, preferences: Reads): PlateValues {
  const pressure = (kPa: number | null) =>
    kPa === null
      ? emptyQuantity<'pressureGauge'>(pressureUnitOf(preferences))
      : quantityOf('pressureGauge', kPa, pressureUnitOf(preferences), preferences.locale);
  return {
    tag: unit.tag,
    name: unit.name,
    applianceKind: unit.applianceKind,
    subsector: unit.subsector ?? '',
    nameplateReadable: unit.nameplateReadable,
    serials: unit.serials.map(({ part, serial, model }) => ({ part, serial, model: model ?? '' })),
    designHigh: pressure(unit.designPressureHighKPaGauge),
    designLow: pressure(unit.designPressureLowKPaGauge),
    installedOn: unit.installedOn ?? '',
  };
}

/** Quantities of a form, read one by one; what cannot be read is named. */
export function reader<Field extends string>(locale: string) {
  const unreadable: Field[] = [];
  const read = <Kind extends QuantityKind>(
    kind: Kind,
    draft: QuantityDraft<Kind>,
    field: Field,
    allowNegative = false,
  ) => {
    const reading = readQuantity(kind, draft, { locale, allowNegative });
    if (reading.is === 'refused' || reading.is === 'ambiguous') unreadable.push(field);
    return reading.is === 'read' ? reading : null;
  };
  return { read, unreadable };
}

/** A gauge pressure from a conversion carries the noise of its doubles; a nameplate has no more than a few digits. */
const kPaOf = (reading: { base: number } | null) => (reading === null ? null : Number(reading.base.toPrecision(10)));

function plateRequest(values: PlateValues, read: ReturnType<typeof reader>['read']) {
  return {
    tag: given(values.tag),
    name: given(values.name),
    subsector: (values.subsector || null) as z.output<typeof subsector> | null,
    serials: values.serials
      .filter(({ serial, model }) => serial.trim() !== '' || model.trim() !== '')
      .map(({ part, serial, model }) => ({ part: part as 'outdoor', serial, model: model.trim() || null })),
    nameplateReadable: values.nameplateReadable,
    designPressureHighKPaGauge: kPaOf(read('pressureGauge', values.designHigh, 'designHigh')),
    designPressureLowKPaGauge: kPaOf(read('pressureGauge', values.designLow, 'designLow')),
    installedOn: values.installedOn || null,
  };
}

/** `instantOf`: the start of that day on the device's clock, so that work of the same day comes after it. */
export function newUnitRequest(
  values: NewUnitValues,
  { locale, instantOf }: { locale: string; instantOf: (day: string) => string | null },
): { request: z.input<typeof createUnitRequest>; unreadable: string[] } {
  const { read, unreadable } = reader<string>(locale);
  const at = instantOf(values.since) ?? '';
  // Nothing typed is missing, not a mass of some other form.
  const mass = (draft: QuantityDraft<'mass'>, field: string) =>
    read('mass', draft, field)?.typed as { value: string; unit: 'g' };
  const knowsFull = values.fullChargeKnown === 'yes';
  return {
    request: {
      id: values.id,
      siteId: given(values.siteId),
      applianceKind: values.applianceKind as z.output<typeof applianceKind>,
      refrigerant: given(values.refrigerant),
      refrigerantFrom: values.since,
      ...plateRequest(values, read as never),
      fullCharge: knowsFull
        ? {
            id: values.fullChargeId,
            mass: mass(values.fullCharge, 'fullCharge'),
            method: values.method as z.output<typeof fullChargeMethod>,
            validFrom: at,
          }
        : null,
      initialCharge:
        values.initial === 'notKnown'
          ? { state: 'notKnown' }
          : {
              state: values.initial,
              mass: mass(values.initialMass, 'initialMass'),
              at,
              entryId: values.entryId,
              groupId: values.groupId,
            },
    },
    unreadable,
  };
}

/** An empty field is missing: the schema then says that, and not which form it should have. */
export const given = (text: string): string => (text.trim() === '' ? (undefined as unknown as string) : text);

/** Only what was changed, so that a change by somebody else meanwhile to another field stays. */
export function changedUnitRequest(
  values: PlateValues,
  before: PlateValues,
  locale: string,
): { request: z.input<typeof updateUnitRequest>; unreadable: string[] } {
  const { read, unreadable } = reader<string>(locale);
  const { read: readBefore } = reader<string>(locale);
  const now = plateRequest(values, read as never);
  const then = plateRequest(before, readBefore as never);
  const changed = Object.entries(now).filter(
    ([name, value]) => JSON.stringify(value) !== JSON.stringify(then[name as keyof typeof then]),
  );
  return { request: Object.fromEntries(changed), unreadable };
}

/** Where the request's places are shown. */
export const PLATE_PLACES = [
  ['/tag', 'tag'],
  ['/name', 'name'],
  ['/applianceKind', 'applianceKind'],
  ['/subsector', 'subsector'],
  ['/designPressureHighKPaGauge', 'designHigh'],
  ['/designPressureLowKPaGauge', 'designLow'],
  ['/installedOn', 'installedOn'],
] as const;

/** The request leaves out empty rows: the n-th that it holds is found among those that the form shows. */
export function serialPlaces(serials: readonly SerialValues[]): [string, string][] {
  const shown = serials.flatMap(({ serial, model }, index) => (serial.trim() || model.trim() ? [index] : []));
  return shown.flatMap((index, position): [string, string][] => [
    [`/serials/${position}/model`, `serials.${index}.model`],
    [`/serials/${position}`, `serials.${index}.serial`],
  ]);
}
