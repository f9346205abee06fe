import type { ChargeRequest } from '../../../shared/charge/charge.schema.ts';
import type { GwpSet } from '../../../shared/reference/gwp.ts';
import type { RoomStandard } from '../../../shared/room-limit/room-limit.schema.ts';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import type { UnitOf } from '../../../shared/units/quantities.ts';
import { newId } from '../../lib/new-id.ts';
import { emptyQuantity, type QuantityDraft } from '../../ui/quantity-draft.ts';

export type RateKind = ChargeRequest['basis']['rate']['kind'];
export type PrechargeScope = NonNullable<ChargeRequest['basis']['precharge']>['scope'];
export type Allocation = 'proportional' | 'largestFirst' | 'smallestFirst';
export type Mounting = 'floor' | 'window' | 'wall' | 'ceiling';

export interface PipeDraft {
  /** For the list on screen alone. */
  key: string;
  name: string;
  parent: string;
  /** Nominal outside diameter in mm as text, '' while none is chosen. */
  liquidOd: string;
  gasOd: string;
  length: QuantityDraft<'length'>;
  rise: QuantityDraft<'length'>;
  bends: string;
  equivalent: QuantityDraft<'length'>;
}

/** Everything on the charge screen as it was typed. Plain JSON: it survives a reload and an error. */
export interface ChargeDraft {
  job: ChargeRequest['job'];
  refrigerant: string;
  factoryCharge: QuantityDraft<'mass'>;
  prechargeScope: PrechargeScope;
  prechargeLength: QuantityDraft<'length'>;
  prechargeMass: QuantityDraft<'mass'>;
  allocation: Allocation | '';
  rateKind: RateKind;
  rate: QuantityDraft<'massPerLength'>;
  sizes: { key: string; od: string; rate: QuantityDraft<'massPerLength'> }[];
  brackets: { key: string; upTo: QuantityDraft<'length'>; extra: QuantityDraft<'mass'> }[];
  expression: string;
  fixedMass: QuantityDraft<'mass'>;
  allowances: { key: string; label: string; each: QuantityDraft<'mass'>; count: string; factor: string }[];
  minLength: QuantityDraft<'length'>;
  maxLength: QuantityDraft<'length'>;
  maxBranch: QuantityDraft<'length'>;
  maxRise: QuantityDraft<'length'>;
  maxDrop: QuantityDraft<'length'>;
  maxTotal: QuantityDraft<'mass'>;
  roundTo: QuantityDraft<'mass'>;
  roundDirection: 'nearest' | 'up' | 'down';
  shortLine: 'none' | 'remove';
  metering: 'indoor' | 'outdoor' | 'unknown';
  document: string;
  page: string;
  pipes: PipeDraft[];
  previousPipes: PipeDraft[];
  gwpSet: GwpSet;
  roomArea: QuantityDraft<'area'>;
  mounting: Mounting;
  roomStandard: RoomStandard;
  /** The manual's own table of charges and smallest rooms; it governs where it is given. */
  roomTable: { key: string; charge: QuantityDraft<'mass'>; area: QuantityDraft<'area'> }[];
  /** What the cylinder shows on the scale before it is opened, gross. */
  cylinderGross: QuantityDraft<'mass'>;
  cylinderId: string;
}

/** The unit that each kind of field starts with for this person; a field keeps its own after that. */
export function fieldUnits(preferences: Pick<Preferences, 'mass' | 'length'>): {
  mass: UnitOf<'mass'>;
  length: UnitOf<'length'>;
  rate: UnitOf<'massPerLength'>;
  area: UnitOf<'area'>;
} {
  const ounces = preferences.mass === 'oz' || preferences.mass === 'lbOz';
  return {
    mass: preferences.mass === 'lbOz' ? 'lb' : preferences.mass,
    length: preferences.length,
    rate: ounces ? 'oz/ft' : 'g/m',
    area: preferences.length === 'ft' ? 'ft2' : 'm2',
  };
}

export type FieldUnits = ReturnType<typeof fieldUnits>;

/** Of a row on the screen; never sent. */
export const rowKey = newId;

export function emptyPipe(name: string, units: FieldUnits): PipeDraft {
  return {
    key: rowKey(),
    name,
    parent: '',
    liquidOd: '',
    gasOd: '',
    length: emptyQuantity(units.length),
    rise: emptyQuantity(units.length),
    bends: '',
    equivalent: emptyQuantity(units.length),
  };
}

/** A, B, C ... the first that no pipe has. */
export function nextPipeName(pipes: readonly PipeDraft[]): string {
  for (let i = 0; ; i++) {
    const name = String.fromCharCode(65 + (i % 26)) + (i >= 26 ? String(Math.floor(i / 26)) : '');
    if (!pipes.some((pipe) => pipe.name.trim() === name)) return name;
  }
}

export function emptyDraft(units: FieldUnits, gwpSet: GwpSet): ChargeDraft {
  const mass = emptyQuantity<'mass'>(units.mass);
  const length = emptyQuantity<'length'>(units.length);
  return {
    job: 'newInstall',
    refrigerant: '',
    factoryCharge: mass,
    prechargeScope: 'system',
    prechargeLength: length,
    prechargeMass: mass,
    allocation: '',
    rateKind: 'flat',
    rate: emptyQuantity(units.rate),
    sizes: [],
    brackets: [],
    expression: '',
    fixedMass: mass,
    allowances: [],
    minLength: length,
    maxLength: length,
    maxBranch: length,
    maxRise: length,
    maxDrop: length,
    maxTotal: mass,
    roundTo: { text: '1', unit: 'g' },
    roundDirection: 'nearest',
    shortLine: 'none',
    metering: 'unknown',
    document: '',
    page: '',
    pipes: [emptyPipe('A', units)],
    previousPipes: [],
    gwpSet,
    roomArea: emptyQuantity(units.area),
    mounting: 'wall',
    roomStandard: 'IEC 60335-2-40:2018',
    roomTable: [],
    cylinderGross: mass,
    cylinderId: '',
  };
}

/** Nothing has been typed or chosen yet. */
export function isUntouched(draft: ChargeDraft): boolean {
  const { refrigerant, factoryCharge, prechargeLength, prechargeMass, rate, cylinderGross, roomArea, pipes } = draft;
  const typed = [factoryCharge, prechargeLength, prechargeMass, rate, cylinderGross, roomArea];
  const [first] = pipes;
  return (
    refrigerant === '' &&
    draft.document === '' &&
    draft.rateKind === 'flat' &&
    draft.job === 'newInstall' &&
    draft.previousPipes.length + draft.allowances.length + draft.roomTable.length === 0 &&
    pipes.length === 1 &&
    first?.length.text === '' &&
    first.liquidOd === '' &&
    typed.every(({ text }) => text === '')
  );
}
