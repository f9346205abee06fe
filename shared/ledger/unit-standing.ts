import type { FlagCode, LedgerFlag } from './flag.ts';
import { massOf, refrigerantsOf, totalOf } from './mass-by-refrigerant.ts';
import { unitPlace } from './place.ts';
import { shortOfSaidFull, type UnitJudgedAt } from './unit-answer.ts';
import type { UnitJudging } from './unit-judging.ts';
import { fullChargeAt, unitRefrigerantAt } from './unit-state.ts';

type Standing = { massMicrograms: bigint | null; figures?: Record<string, bigint> } | null;

/** How the unit stands after a group; a flag that stood before keeps the group that brought it about. */
export function unitStandingFlags(judging: UnitJudging, at: UnitJudgedAt, asked: boolean): LedgerFlag[] {
  const { register, group, flow, before } = at;
  const place = unitPlace(register.unitId);
  const refrigerant = unitRefrigerantAt(register, group.occurredAt);
  const stood = (code: FlagCode) => before.standing.find((flag) => flag.code === code);
  const flags: LedgerFlag[] = [];
  const stand = (code: FlagCode, standing: Standing, groupId = stood(code)?.groupId ?? group.id): void => {
    if (!standing) return;
    const { massMicrograms, figures = {} } = standing;
    flags.push({ code, place, groupId, refrigerant, massMicrograms, standing: true, figures });
  };
  const keep = (code: FlagCode, holds: boolean): void => {
    const earlier = stood(code);
    if (earlier && holds) flags.push(earlier);
  };

  const said = flow.statement?.is ?? null;
  const isSaidToHold = said === 'full' || said === 'moreThanFull' || said === 'empty';
  stand('bookNotKnown', judging.known ? null : { massMicrograms: totalOf(judging.book) });
  stand('bookAboveFullCharge', aboveFullCharge(judging, at));
  if (said === 'notFull') stand('unitShort', { massMicrograms: null }, group.id);
  else keep('unitShort', !isSaidToHold);
  if (asked) stand('askIfFull', { massMicrograms: null }, group.id);
  else keep('askIfFull', said === null || said === 'notKnown');
  const short = shortOfSaidFull(judging, at);
  if (short !== null) stand('saidFullBookBelow', { massMicrograms: short }, group.id);
  else keep('saidFullBookBelow', !isSaidToHold);
  stand('fullChargeNotDetermined', lacksFullCharge(at) ? { massMicrograms: null } : null);
  return flags;
}

function aboveFullCharge(judging: UnitJudging, { register, group }: UnitJudgedAt): Standing {
  const refrigerant = unitRefrigerantAt(register, group.occurredAt);
  if (!judging.known || refrigerant === null) return null;
  const fullCharge = fullChargeAt(register, refrigerant, group.occurredAt);
  const over = massOf(judging.book, refrigerant) - (fullCharge ?? 0n);
  if (fullCharge === null || over <= 0n || !judging.isBeyond(over)) return null;
  return { massMicrograms: over, figures: { fullChargeMicrograms: fullCharge } };
}

/** A unit that somebody adds to or speaks of, and whose full charge nobody has determined. */
function lacksFullCharge({ register, group, flow, before }: UnitJudgedAt): boolean {
  const refrigerant = unitRefrigerantAt(register, group.occurredAt);
  if (refrigerant !== null && fullChargeAt(register, refrigerant, group.occurredAt) !== null) return false;
  const stood = before.standing.some((flag) => flag.code === 'fullChargeNotDetermined');
  return stood || flow.statement !== null || refrigerantsOf(flow.additions).length > 0;
}
