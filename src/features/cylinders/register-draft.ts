import type { z } from 'zod';
import type { Cylinder, createCylinderRequest } from '../../../shared/cylinders/cylinder.schema.ts';
import type { TypedMass } from '../../../shared/units/mass.ts';
import { instantOfLocal } from '../../lib/local-time.ts';
import { emptyQuantity, type QuantityDraft, type QuantityReading, readQuantity } from '../../ui/quantity-draft.ts';
import { emptyPurchase, type GroupRequest, type PurchaseDraft, purchaseRequest } from './purchase.ts';

/** A cylinder as it is being registered, and how its content begins. Plain JSON, so that it survives a reload. */
export interface RegisterDraft {
  id: string;
  tareId: string;
  tag: string;
  kind: Cylinder['kind'];
  refrigerant: string;
  contentState: Cylinder['contentState'];
  /** `ours`, `party:<id>` or `customer:<id>`. */
  owner: string;
  tare: QuantityDraft<'mass'>;
  tareFrom: string;
  waterCapacity: QuantityDraft<'mass'>;
  stampedLimit: QuantityDraft<'mass'>;
  servicePressure: QuantityDraft<'pressureGauge'>;
  retestDue: string;
  heldBy: string;
  batch: string;
  begins: 'bought' | 'weighed' | 'empty';
  purchase: PurchaseDraft;
  weighing: { groupId: string; readingId: string; gross: QuantityDraft<'mass'>; toolId: string | null; at: string };
  /** The register has it; only the beginning of its content is still to be posted. */
  made: boolean;
}

export function emptyRegisterDraft(
  newId: () => string,
  units: { mass: 'g' | 'kg' | 'lb' | 'oz'; pressure: 'psi' | 'bar' | 'kPa' },
  now: { local: string; day: string },
): RegisterDraft {
  return {
    id: newId(),
    tareId: newId(),
    tag: '',
    kind: 'refillable',
    refrigerant: '',
    contentState: 'virgin',
    owner: 'ours',
    tare: emptyQuantity(units.mass),
    tareFrom: now.day,
    waterCapacity: emptyQuantity(units.mass),
    stampedLimit: emptyQuantity(units.mass),
    servicePressure: emptyQuantity<'pressureGauge'>(units.pressure),
    retestDue: '',
    heldBy: '',
    batch: '',
    begins: 'bought',
    purchase: emptyPurchase(newId, units.mass, now),
    weighing: { groupId: newId(), readingId: newId(), gross: emptyQuantity(units.mass), toolId: null, at: now.local },
    made: false,
  };
}

/** Every field of the draft that holds a quantity, read as the person's locale writes it. */
export function readRegisterDraft(draft: RegisterDraft, locale: string) {
  const mass = (field: QuantityDraft<'mass'>) => readQuantity('mass', field, { locale });
  return {
    tare: mass(draft.tare),
    waterCapacity: mass(draft.waterCapacity),
    stampedLimit: mass(draft.stampedLimit),
    servicePressure: readQuantity('pressureGauge', draft.servicePressure, { locale }),
    bought: mass(draft.purchase.mass),
    gross: mass(draft.weighing.gross),
  };
}
export type ReadDraft = ReturnType<typeof readRegisterDraft>;

/** What cannot be read is sent as nothing valid, so that the schema names its place. */
const typedOf = (reading: QuantityReading<'mass'>) =>
  (reading.is === 'read' ? reading.typed : { value: '', unit: 'g' }) as TypedMass;
const typedOrNull = (reading: QuantityReading<'mass'>) => (reading.is === 'empty' ? null : typedOf(reading));

export function cylinderRequest(draft: RegisterDraft, read: ReadDraft): z.input<typeof createCylinderRequest> {
  const [ownerKind, ownerId] = draft.owner.split(':');
  return {
    id: draft.id,
    tag: draft.tag,
    kind: draft.kind,
    refrigerant: draft.refrigerant,
    contentState: draft.contentState,
    owner: ownerKind === 'ours' ? { kind: 'ours' } : { kind: ownerKind as 'party', id: ownerId ?? '' },
    tare: { id: draft.tareId, mass: typedOf(read.tare), validFrom: instantOfLocal(`${draft.tareFrom}T00:00`) ?? '' },
    waterCapacity: typedOrNull(read.waterCapacity),
    stampedLimit: typedOrNull(read.stampedLimit),
    servicePressureKPaGauge:
      read.servicePressure.is === 'empty'
        ? null
        : read.servicePressure.is === 'read'
          ? read.servicePressure.base
          : Number.NaN,
    retestDue: draft.retestDue || null,
    heldBy: draft.heldBy || null,
    batch: draft.batch.trim() || null,
  };
}

/** The first group of the cylinder; null where it begins empty. */
export function beginningRequest(
  draft: RegisterDraft,
  read: ReadDraft,
  { toolId, deviceSentAt }: { toolId: string | null; deviceSentAt: string },
): GroupRequest | null {
  if (draft.begins === 'empty') return null;
  if (draft.begins === 'bought') return purchaseRequest(draft.purchase, draft, read.bought, deviceSentAt);
  const { weighing } = draft;
  const typed = typedOf(read.gross);
  return {
    groupId: weighing.groupId,
    schema: 1,
    kind: 'opening',
    occurredAt: instantOfLocal(weighing.at) ?? '',
    deviceSentAt,
    readings: [
      {
        id: weighing.readingId,
        cylinderId: draft.id,
        toolId,
        moment: 'only',
        mode: 'gross',
        value: typed.value,
        unit: typed.unit,
      },
    ],
    entries: [],
    statements: [],
    documents: [],
    reason: draft.purchase.reason.trim() || null,
  } as GroupRequest;
}
