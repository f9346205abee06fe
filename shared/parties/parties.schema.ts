import { z } from 'zod';
import { id, pageOf, pageQuery, searchText, shortText } from '../lists/list.schema.ts';

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

export const PARTY_SORTS = ['name', '-name'] as const;
export const partyListQuery = pageQuery.extend({
  sort: z.enum(PARTY_SORTS).default('name'),
  kind: partyKind.optional(),
  /** Over the name. */
  search: searchText.optional(),
});
export type PartyListQuery = z.output<typeof partyListQuery>;
export const partyPage = pageOf(party);
