import { z } from 'zod';
import { cylinder } from '../cylinders/cylinder.schema.ts';
import { entryRow, flagRow, onHand } from '../entries/entry.schema.ts';
import { id, instant } from '../lists/list.schema.ts';

/** A weigh-in with a start and no end: it stays on the day until it is weighed back. */
export const openWeighIn = z.strictObject({
  groupId: id,
  cylinderId: id,
  cylinderTag: z.string(),
  unitId: id.nullable(),
  unitLabel: z.string().nullable(),
  chargeSheetId: id.nullable(),
  refrigerant: z.string(),
  startedAt: instant,
  timeZone: z.string(),
  startGrossG: z.number(),
  hoseFull: z.boolean(),
  hoseG: z.number().nullable(),
  toolId: id.nullable(),
  startedBy: id,
  startedByName: z.string(),
});
export type OpenWeighIn = z.output<typeof openWeighIn>;

export const todayResponse = z.strictObject({
  /** The technician's van: cylinders this person holds. */
  onTheVan: z.array(cylinder),
  toWeighBack: z.array(openWeighIn),
  /** The office's day: what came in since yesterday (entry groups' newest entries), what contradicts, what is due. */
  cameIn: z.array(entryRow),
  contradicts: z.array(flagRow),
  due: z.array(
    z.strictObject({
      kind: z.enum(['retest', 'toolCheck', 'invitationExpires']),
      id,
      label: z.string(),
      on: z.iso.date(),
      overdue: z.boolean(),
    }),
  ),
  onHand,
});
export type Today = z.output<typeof todayResponse>;
