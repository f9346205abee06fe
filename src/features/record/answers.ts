import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { UnitCondition } from '../../../shared/ledger/entry-group.schema.ts';
import type { EvacuationException } from '../../../shared/reference/evacuation-level.ts';
import type { FullChargeMethod, Unit } from '../../../shared/unit-register/unit.schema.ts';
import type { TypedMass } from '../../../shared/units/mass.ts';
import { emptyQuantity, type QuantityDraft, readQuantity } from '../../ui/quantity-draft.ts';

export type MassDraft = QuantityDraft<'mass'>;
export type MassUnit = 'g' | 'kg' | 'lb' | 'oz';
/** How a cylinder's mass is told: tare included, since the scale was zeroed, or by what its book holds. */
export type RowMode = 'gross' | 'zeroed' | 'book';

/** One cylinder on the scale, before and after, or once. */
export interface WeighedRow {
  ids: { before: string; after: string; mass: string; hose: string };
  cylinderId: string;
  toolId: string;
  mode: RowMode;
  before: MassDraft;
  after: MassDraft;
  /** What the hose holds; empty: there was none, or nothing in it. */
  hose: MassDraft;
  hasHose: boolean;
  hoseFullAtStart: boolean;
  hoseEnd: 'lost' | 'emptied' | 'recovered';
  hoseInto: string;
}

export interface CertifiedRow {
  ids: { entry: string };
  refrigerant: string;
  sent: MassDraft;
  certified: MassDraft;
}

export type FullAnswer = Exclude<UnitCondition, 'empty'>;

/**
 * What a person has typed into a form, as plain data that survives a reload. One form asks a part of it. The ids are
 * made once, when the form opens, so that a second try cannot post twice.
 */
export interface Answers {
  ids: {
    group: string;
    entry: string;
    entry2: string;
    reading: string;
    reversal: string;
    change: string;
    change2: string;
  };
  unitId: string;
  jobId: string;
  rows: WeighedRow[];
  /** The one closed question that some forms begin with: which of a few things happened. */
  choice: string;
  mass: MassDraft;
  partyId: string;
  /** Where the unit goes. */
  siteId: string;
  /** What comes into the unit instead. */
  refrigerant: string;
  method: FullChargeMethod;
  documentNumber: string;
  documentDate: string;
  certified: CertifiedRow[];
  machineId: string;
  machineAge: 'newer' | 'older' | 'unknown';
  levelReached: string;
  levelException: EvacuationException | 'other' | '';
  at: string;
  answer: FullAnswer | null;
  /** The group that papers belong to, or correct. */
  aboutGroupId: string;
  /** What must not be done has been done. */
  happened: boolean;
  reason: string;
  note: string;
}

export interface Beginning {
  newId: () => string;
  unit: MassUnit;
  now: { local: string; day: string };
  unitId?: string;
  cylinderId?: string;
}

export function emptyRow(newId: () => string, unit: MassUnit, cylinderId = '', mode: RowMode = 'gross'): WeighedRow {
  return {
    ids: { before: newId(), after: newId(), mass: newId(), hose: newId() },
    cylinderId,
    toolId: '',
    mode,
    before: emptyQuantity(unit),
    after: emptyQuantity(unit),
    hose: emptyQuantity(unit === 'kg' ? 'g' : unit === 'lb' ? 'oz' : unit),
    hasHose: false,
    hoseFullAtStart: false,
    hoseEnd: 'lost',
    hoseInto: '',
  };
}

export const emptyCertified = (newId: () => string, unit: MassUnit, refrigerant = ''): CertifiedRow => ({
  ids: { entry: newId() },
  refrigerant,
  sent: emptyQuantity(unit),
  certified: emptyQuantity(unit),
});

/** @param rows how many cylinders the form begins with */
export function emptyAnswers({ newId, unit, now, unitId = '', cylinderId = '' }: Beginning, rows: number): Answers {
  return {
    ids: {
      group: newId(),
      entry: newId(),
      entry2: newId(),
      reading: newId(),
      reversal: newId(),
      change: newId(),
      change2: newId(),
    },
    unitId,
    jobId: '',
    rows: Array.from({ length: rows }, (_, index) => emptyRow(newId, unit, index === 0 ? cylinderId : '')),
    choice: '',
    mass: emptyQuantity(unit),
    partyId: '',
    siteId: '',
    refrigerant: '',
    method: 'manufacturer',
    documentNumber: '',
    documentDate: now.day,
    certified: [emptyCertified(newId, unit)],
    machineId: '',
    machineAge: 'unknown',
    levelReached: '',
    levelException: '',
    at: now.local,
    answer: null,
    aboutGroupId: '',
    happened: false,
    reason: '',
    note: '',
  };
}

/** What the forms know besides what was typed. */
export interface FormContext {
  locale: string;
  unit: Pick<
    Unit,
    'id' | 'tag' | 'refrigerant' | 'siteId' | 'siteName' | 'customerId' | 'customerName' | 'book' | 'fullCharge'
  > | null;
  cylinder: (id: string) => KnownCylinder | undefined;
  /** A law's level is asked where that law holds. */
  jurisdiction: string | null;
  /** Whose rule a cylinder's pressure is judged by: the firm's own. */
  firmJurisdiction: 'US' | 'EU' | null;
  today: string;
  /** Day on which the chosen recovery machine was made; null: not known. */
  machineMadeOn: string | null;
  /** The pick-up that an invoice is for. */
  purchase: { groupId: string; occurredAt: string; supplierId: string; refrigerant: string; massG: number } | null;
  instant: (local: string) => string;
  say: (key: string, params?: Record<string, string | number>) => string;
}

export type KnownCylinder = Pick<
  Cylinder,
  | 'id'
  | 'tag'
  | 'kind'
  | 'refrigerant'
  | 'contentG'
  | 'stampedLimitG'
  | 'waterCapacityG'
  | 'servicePressureKPaGauge'
  | 'retestDue'
  | 'tareG'
  | 'tareTyped'
  | 'byRefrigerant'
  | 'mixed'
  | 'owner'
  | 'lastWeighedAt'
>;

/** The mass in a blank, or null while there is none to reckon with. */
export function typedOf(draft: MassDraft, { locale }: Pick<FormContext, 'locale'>): TypedMass | null {
  const reading = readQuantity('mass', draft, { locale, allowNegative: true });
  return reading.is === 'read' ? (reading.typed as TypedMass) : null;
}

/** What a cylinder holds by name; null where it holds several: the server then splits by its book. */
export function refrigerantIn(cylinder: KnownCylinder | undefined): string | null {
  if (!cylinder) return '';
  if (cylinder.mixed) return null;
  return cylinder.byRefrigerant.find(({ massG }) => massG > 0)?.refrigerant ?? cylinder.refrigerant;
}
