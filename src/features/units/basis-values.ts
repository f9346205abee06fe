import type { z } from 'zod';
import type { ChargeBasis } from '../../../shared/charge/charge.schema.ts';
import type { addChargeBasisRequest, StoredChargeBasis } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import type { QuantityKind, UnitOf } from '../../../shared/units/quantities.ts';
import { readNumber } from '../../../shared/units/read-number.ts';
import { emptyQuantity, type QuantityDraft, quantityOf } from '../../ui/quantity-draft.ts';
import { given, massUnitOf, reader } from './unit-values.ts';

type Mass = QuantityDraft<'mass'>;
type Length = QuantityDraft<'length'>;

export const LIMIT_NAMES = ['minLengthM', 'maxLengthM', 'maxBranchM', 'maxRiseM', 'maxDropM'] as const;
export const RATE_KINDS = ['flat', 'byLiquidPipe', 'stepped', 'formula', 'fixedMass'] as const;
export const SCOPES = ['none', 'system', 'systemPerBranch', 'branch', 'mass'] as const;

/** What the manual says, as the form holds it: fields of kinds that are not chosen keep what was typed. */
export interface BasisValues {
  id: string;
  validFrom: string;
  document: string;
  page: string;
  note: string;
  factoryCharge: Mass;
  scope: (typeof SCOPES)[number];
  prechargeLength: Length;
  prechargeMass: Mass;
  allocation: string;
  rateKind: (typeof RATE_KINDS)[number];
  rate: QuantityDraft<'massPerLength'>;
  sizes: { od: string; rate: QuantityDraft<'massPerLength'> }[];
  steps: { upTo: Length; extra: Mass }[];
  expression: string;
  fixedMass: Mass;
  allowances: { label: string; each: Mass; count: string; factor: string }[];
  limits: Record<(typeof LIMIT_NAMES)[number], Length>;
  maxTotal: Mass;
  roundTo: Mass;
  direction: string;
  shortLine: string;
  metering: string;
}

type Reads = Pick<Preferences, 'locale' | 'length' | 'mass'>;

export const rateUnitOf = ({ mass }: Reads): UnitOf<'massPerLength'> =>
  mass === 'oz' || mass === 'lbOz' ? 'oz/ft' : 'g/m';

export const emptySize = (preferences: Reads) => ({
  od: '',
  rate: emptyQuantity<'massPerLength'>(rateUnitOf(preferences)),
});
export const emptyStep = (preferences: Reads) => ({
  upTo: emptyQuantity<'length'>(preferences.length),
  extra: emptyQuantity<'mass'>(massUnitOf(preferences)),
});
export const emptyAllowance = (preferences: Reads) => ({
  label: '',
  each: emptyQuantity<'mass'>(massUnitOf(preferences)),
  count: '1',
  factor: '',
});

/** The basis on record, or an empty form; a new one begins with what is there. */
export function basisValues(
  stored: StoredChargeBasis | null,
  preferences: Reads,
  { id, validFrom }: { id: string; validFrom: string },
): BasisValues {
  const { locale } = preferences;
  const show =
    <Kind extends QuantityKind>(kind: Kind, unit: UnitOf<Kind>) =>
    (base: number | null | undefined) =>
      typeof base === 'number' ? quantityOf(kind, base, unit, locale) : emptyQuantity<Kind>(unit);
  const mass = show('mass', massUnitOf(preferences));
  const length = show('length', preferences.length);
  const rate = show('massPerLength', rateUnitOf(preferences));
  const basis = stored?.basis;
  const { precharge } = basis ?? {};
  const ofRate = basis?.rate;
  return {
    id,
    validFrom,
    document: stored?.manual.document ?? '',
    page: stored?.manual.page ?? '',
    note: '',
    factoryCharge: mass(basis?.factoryChargeG),
    scope: precharge?.scope ?? (basis ? 'none' : 'system'),
    prechargeLength: length(precharge && precharge.scope !== 'mass' ? precharge.lengthM : null),
    prechargeMass: mass(precharge?.scope === 'mass' ? precharge.massG : null),
    allocation: precharge?.allocation ?? '',
    rateKind: ofRate?.kind ?? 'flat',
    rate: rate(ofRate?.kind === 'flat' ? ofRate.gPerM : null),
    sizes:
      ofRate?.kind === 'byLiquidPipe'
        ? ofRate.sizes.map((size) => ({ od: String(size.liquidOdMm), rate: rate(size.gPerM) }))
        : [emptySize(preferences)],
    steps:
      ofRate?.kind === 'stepped'
        ? ofRate.steps.map((step) => ({ upTo: length(step.upToM), extra: mass(step.extraG) }))
        : [emptyStep(preferences)],
    expression: ofRate?.kind === 'formula' ? ofRate.expression : '',
    fixedMass: mass(ofRate?.kind === 'fixedMass' ? ofRate.extraG : null),
    allowances: (basis?.allowances ?? []).map((row) => ({
      label: row.label,
      each: mass(row.gEach),
      count: String(row.count),
      factor: row.factor === null || row.factor === undefined || row.factor === 1 ? '' : String(row.factor),
    })),
    limits: Object.fromEntries(
      LIMIT_NAMES.map((name) => [name, length(basis?.limits?.[name])]),
    ) as BasisValues['limits'],
    maxTotal: mass(basis?.limits?.maxTotalChargeG),
    roundTo: basis ? mass(basis.rounding?.toG) : quantityOf('mass', 1, 'g', locale),
    direction: basis?.rounding?.direction ?? 'nearest',
    shortLine: basis?.shortLine ?? 'none',
    metering: basis?.metering ?? 'unknown',
  };
}

/** Nothing typed where something is needed: the schema then says that it is missing. */
const MISSING = undefined as unknown as number;

export function basisRequest(
  values: BasisValues,
  {
    locale,
    refrigerant,
    instantOf,
    notNumber,
  }: {
    locale: string;
    refrigerant: string;
    instantOf: (local: string) => string | null;
    /** The sentence for a count or factor that is no number. */
    notNumber: (typed: string) => string;
  },
): { request: z.input<typeof addChargeBasisRequest>; unreadable: (string | { field: string; message: string })[] } {
  const { read, unreadable: quantities } = reader<string>(locale);
  const numbers: { field: string; message: string }[] = [];
  const base = <Kind extends QuantityKind>(kind: Kind, draft: QuantityDraft<Kind>, field: string, signed = false) => {
    const reading = read(kind, draft, field, signed);
    return reading === null ? null : Number(reading.base.toPrecision(12));
  };
  const number = (text: string, field: string): number | null => {
    if (text.trim() === '') return null;
    const reading = readNumber(text);
    if (reading.is === 'number') return Number(reading.value);
    numbers.push({ field, message: notNumber(text) });
    return null;
  };
  const { scope } = values;
  const usesLength = values.rateKind !== 'stepped' && values.rateKind !== 'fixedMass';
  const allocation = (values.allocation || null) as 'proportional' | null;
  const precharge: ChargeBasis['precharge'] =
    !usesLength || scope === 'none'
      ? null
      : scope === 'mass'
        ? { scope, massG: base('mass', values.prechargeMass, 'prechargeMass') ?? MISSING }
        : { scope, lengthM: base('length', values.prechargeLength, 'prechargeLength') ?? MISSING, allocation };
  const roundG = base('mass', values.roundTo, 'roundTo');
  const limits = Object.fromEntries(
    LIMIT_NAMES.map((name) => [name, base('length', values.limits[name], `limits.${name}`)]),
  );
  return {
    request: {
      id: values.id,
      validFrom: instantOf(values.validFrom) ?? '',
      basis: {
        refrigerant,
        factoryChargeG: base('mass', values.factoryCharge, 'factoryCharge') ?? MISSING,
        precharge,
        rate: rate(),
        metering: values.metering as 'unknown',
        allowances: values.allowances.map((row, index) => ({
          label: given(row.label),
          gEach: base('mass', row.each, `allowances.${index}.each`, true) ?? MISSING,
          count: number(row.count, `allowances.${index}.count`) ?? MISSING,
          factor: number(row.factor, `allowances.${index}.factor`),
        })),
        limits: { ...limits, maxTotalChargeG: base('mass', values.maxTotal, 'maxTotal') },
        rounding: roundG === null ? null : { toG: roundG, direction: values.direction as 'nearest' },
        shortLine: values.shortLine as 'none',
      },
      manual: { document: given(values.document), page: values.page.trim() || null },
      note: values.note.trim() || null,
    },
    unreadable: [...quantities, ...numbers],
  };

  function rate(): ChargeBasis['rate'] {
    switch (values.rateKind) {
      case 'flat':
        return { kind: 'flat', gPerM: base('massPerLength', values.rate, 'rate') ?? MISSING };
      case 'byLiquidPipe':
        return {
          kind: 'byLiquidPipe',
          sizes: values.sizes.map((row, index) => ({
            liquidOdMm: row.od === '' ? MISSING : Number(row.od),
            gPerM: base('massPerLength', row.rate, `sizes.${index}.rate`) ?? MISSING,
          })),
        };
      case 'stepped':
        return {
          kind: 'stepped',
          steps: values.steps.map((row, index) => ({
            upToM: base('length', row.upTo, `steps.${index}.upTo`) ?? MISSING,
            extraG: base('mass', row.extra, `steps.${index}.extra`, true) ?? MISSING,
          })),
        };
      case 'formula':
        return { kind: 'formula', expression: given(values.expression.trim()) };
      case 'fixedMass':
        return { kind: 'fixedMass', extraG: base('mass', values.fixedMass, 'fixedMass', true) ?? MISSING };
    }
  }
}

export function basisPlaces(values: BasisValues): [string, string][] {
  const rows = <T>(list: readonly T[], at: string, field: string, names: readonly (readonly [string, string])[]) =>
    list.flatMap((_, index) =>
      names.map(([place, name]): [string, string] => [`${at}/${index}/${place}`, `${field}.${index}.${name}`]),
    );
  return [
    ['/manual/document', 'document'],
    ['/manual/page', 'page'],
    ['/validFrom', 'validFrom'],
    ['/note', 'note'],
    ['/basis/factoryChargeG', 'factoryCharge'],
    ['/basis/precharge/massG', 'prechargeMass'],
    ['/basis/precharge/allocation', 'allocation'],
    ['/basis/precharge', 'prechargeLength'],
    ['/basis/rate/gPerM', 'rate'],
    ...rows(values.sizes, '/basis/rate/sizes', 'sizes', [
      ['liquidOdMm', 'od'],
      ['gPerM', 'rate'],
    ]),
    ...rows(values.steps, '/basis/rate/steps', 'steps', [
      ['upToM', 'upTo'],
      ['extraG', 'extra'],
    ]),
    ['/basis/rate/expression', 'expression'],
    ['/basis/rate/extraG', 'fixedMass'],
    ...rows(values.allowances, '/basis/allowances', 'allowances', [
      ['label', 'label'],
      ['gEach', 'each'],
      ['count', 'count'],
      ['factor', 'factor'],
    ]),
    ...LIMIT_NAMES.map((name): [string, string] => [`/basis/limits/${name}`, `limits.${name}`]),
    ['/basis/limits/maxTotalChargeG', 'maxTotal'],
    ['/basis/rounding', 'roundTo'],
  ];
}
