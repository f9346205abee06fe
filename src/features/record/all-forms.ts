import type { FormKind, RecordForm } from './form.ts';
import { customerRefrigerant, otherContractor, putBack, refill, traceCharge } from './forms/addition.ts';
import { foundEmpty, vacuum } from './forms/empty-unit.ts';
import { invoice } from './forms/invoice.ts';
import { found, handOver, loss, relocation, warrantyReplacement } from './forms/life.ts';
import { overchargeRemoved, partialRecovery, recovery } from './forms/recovery.ts';
import { retrofit } from './forms/retrofit.ts';
import { certificate, destruction, lend, reclaim, returned } from './forms/sent.ts';
import { heelRemoved, transfer } from './forms/transfer.ts';

/** Most used first; the list of things to record keeps this order. */
export const FORMS: readonly RecordForm[] = [
  recovery,
  refill,
  putBack,
  foundEmpty,
  vacuum,
  traceCharge,
  partialRecovery,
  overchargeRemoved,
  customerRefrigerant,
  otherContractor,
  warrantyReplacement,
  relocation,
  retrofit,
  handOver,
  transfer,
  heelRemoved,
  reclaim,
  returned,
  loss,
  found,
  lend,
  destruction,
  invoice,
  certificate,
];

export const findForm = (kind: string): RecordForm | null =>
  FORMS.find((form) => form.kind === (kind as FormKind)) ?? null;
