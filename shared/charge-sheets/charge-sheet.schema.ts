import { z } from 'zod';
import { chargeBasis, chargeRequest, chargeResponse } from '../charge/charge.schema.ts';
import { id, instant, pageOf, shortText } from '../lists/list.schema.ts';
import { roomLimitRequest } from '../room-limit/room-limit.schema.ts';

/** Where the manual says it: the document, its page, and a photo's hash when there is one. */
export const manualReference = z.strictObject({ document: shortText(160), page: shortText(20).nullish() });

/** What the installation manual says about charging this model; dated, earlier ones stay. */
export const addChargeBasisRequest = z.strictObject({
  id,
  validFrom: instant,
  basis: chargeBasis,
  manual: manualReference,
  note: shortText(500).nullish(),
});
export const storedChargeBasis = z.strictObject({
  id,
  unitId: id,
  validFrom: instant,
  basis: chargeBasis,
  manual: manualReference,
  note: z.string().nullable(),
});
export type StoredChargeBasis = z.output<typeof storedChargeBasis>;

/** The smallest room served, for flammable refrigerants. */
export const chargeRoom = z.strictObject({
  areaM2: z.number().positive().max(100_000),
  mounting: z.enum(['floor', 'window', 'wall', 'ceiling']),
  standard: roomLimitRequest.shape.standard,
  manualTable: roomLimitRequest.shape.manualTable,
});

/** A charge sheet freezes inputs, result and versions. It is calculated by the server from `request` and never changed. */
export const createChargeSheetRequest = z.strictObject({
  id,
  request: chargeRequest,
  manual: manualReference.nullish(),
  room: chargeRoom.nullish(),
  jobId: id.nullish(),
});
export const chargeSheet = z.strictObject({
  id,
  unitId: id,
  madeAt: instant,
  madeBy: id,
  madeByName: z.string(),
  request: chargeRequest,
  result: chargeResponse,
  manual: manualReference.nullable(),
  room: chargeRoom.nullable(),
  jobId: id.nullable(),
  /** SHA-256 of the record, hex; null for a reader, who does not see the journal. */
  recordHash: z.string().nullable(),
});
export type ChargeSheet = z.output<typeof chargeSheet>;
export const chargeSheetPage = pageOf(chargeSheet);
export const chargeBasisPage = pageOf(storedChargeBasis);
