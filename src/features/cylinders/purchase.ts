import type { z } from 'zod';
import type { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import type { TypedMass } from '../../../shared/units/mass.ts';
import { instantOfLocal } from '../../lib/local-time.ts';
import { emptyQuantity, type QuantityDraft, type QuantityReading } from '../../ui/quantity-draft.ts';

export type GroupRequest = z.input<typeof entryGroupRequest>;

/** Refrigerant from a supplier into a cylinder, by its invoice or its label. */
export interface PurchaseDraft {
  groupId: string;
  entryId: string;
  supplierId: string;
  mass: QuantityDraft<'mass'>;
  by: 'invoice' | 'label';
  invoiceNumber: string;
  invoiceDate: string;
  at: string;
  happened: boolean;
  reason: string;
}

export const emptyPurchase = (
  newId: () => string,
  unit: 'g' | 'kg' | 'lb' | 'oz',
  now: { local: string; day: string },
): PurchaseDraft => ({
  groupId: newId(),
  entryId: newId(),
  supplierId: '',
  mass: emptyQuantity(unit),
  by: 'label',
  invoiceNumber: '',
  invoiceDate: now.day,
  at: now.local,
  happened: false,
  reason: '',
});

/** Not whole yet is left blank, so that the schema names the place. An invoice may follow later. */
export function purchaseRequest(
  draft: PurchaseDraft,
  cylinder: { id: string; refrigerant: string },
  mass: QuantityReading<'mass'>,
  deviceSentAt: string,
): GroupRequest {
  const typed = (mass.is === 'read' ? mass.typed : { value: '', unit: 'g' }) as TypedMass;
  const hasInvoice = draft.by === 'invoice' && draft.invoiceNumber.trim() !== '';
  return {
    groupId: draft.groupId,
    schema: 1,
    kind: 'purchase',
    occurredAt: instantOfLocal(draft.at) ?? '',
    deviceSentAt,
    readings: [],
    entries: [
      {
        id: draft.entryId,
        refrigerant: cylinder.refrigerant,
        mass: typed,
        from: { place: 'supplier', id: draft.supplierId },
        to: { place: 'cylinder', id: cylinder.id },
        howKnown: draft.by,
      },
    ],
    statements: [],
    documents: hasInvoice
      ? [
          {
            kind: 'invoice',
            number: draft.invoiceNumber.trim(),
            date: draft.invoiceDate,
            refrigerant: cylinder.refrigerant,
            mass: typed,
          },
        ]
      : [],
    reason: draft.reason.trim() || null,
  } as GroupRequest;
}
