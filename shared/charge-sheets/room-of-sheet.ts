import type { ChargeResponse } from '../charge/charge.schema.ts';
import { done, type Outcome, refused } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import { judgeRoomLimit } from '../room-limit/judge-room-limit.ts';
import type { ChargeSheet } from './charge-sheet.schema.ts';

/** What of a sheet its room is held against. */
export interface SheetInRoom {
  refrigerant: string;
  result: Pick<ChargeResponse, 'totalG' | 'weighInG'>;
  room: ChargeSheet['room'];
}

/**
 * Over the limit of the smallest room served stops the charge step, with no override: a sheet that asks for refrigerant
 * is then not made. One that takes refrigerant out, or names no room, is.
 *
 * Refuses `overRoomLimit` at `/room` (g), and a manual's table that cannot be read. A class that the room check does
 * not cover has the local code instead, and is not refused.
 */
export function checkRoomOfSheet({ refrigerant, result, room }: SheetInRoom, reference: ReferenceData): Outcome<null> {
  if (room === null || result.weighInG <= 0) return done(null);
  const judged = judgeRoomLimit({ refrigerant, chargeG: result.totalG, ...room }, reference);
  if (!judged.ok) {
    const ofRoom = judged.refusals.filter(({ code }) => code !== 'classNotCovered');
    return ofRoom.length === 0
      ? done(null)
      : refused(...ofRoom.map((refusal) => ({ ...refusal, path: `/room${refusal.path}` })));
  }
  if (judged.value.verdict !== 'over') return done(null);
  return refused({ code: 'overRoomLimit', path: '/room', given: result.totalG, allowed: judged.value.limitG });
}
