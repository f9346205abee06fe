import { z } from 'zod';
import { id, shortText } from '../lists/list.schema.ts';

/** Who refrigerant comes from or goes to, besides customers. */
export const PARTY_KINDS = ['supplier', 'reclaimer', 'otherContractor'] as const;
export const partyKind = z.enum(PARTY_KINDS);
export const createPartyRequest = z.strictObject({
  id,
  kind: partyKind,
  name: shortText(160),
  note: shortText(500).nullish(),
});
export const updatePartyRequest = createPartyRequest.omit({ id: true, kind: true }).partial();
export const party = z.strictObject({
  id,
  kind: partyKind,
  name: z.string(),
  note: z.string().nullable(),
  version: z.int(),
});
export type Party = z.output<typeof party>;
