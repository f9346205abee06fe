import { roundTo } from '../units/round.ts';
import type { ChargeRequest } from './charge.schema.ts';
import type { CautionSignal, ChargeCaution } from './charge-result.ts';
import type { RefrigerantFacts } from './refrigerant-facts.ts';

/** These took R-410A's place in equipment that looks the same: its rates are at hand and wrong (reference: 6 to 9 % less dense). */
const TOOK_THE_PLACE_OF_R410A = new Set(['R-32', 'R-454B', 'R-452B']);

const ORDER: Record<CautionSignal, number> = { danger: 0, warning: 1, caution: 2, notice: 3 };

interface Figures {
  totalG: number;
  weighInG: number;
  recoverG: number;
}

/** The hazards of weighing in this refrigerant and this much of it, the gravest first. Only what this job meets. */
export function cautionsFor(request: ChargeRequest, facts: RefrigerantFacts, figures: Figures): ChargeCaution[] {
  const { refrigerant } = facts;
  const { designation, safetyClass } = refrigerant;
  const cautions: ChargeCaution[] = [];
  const say = (code: ChargeCaution['code'], signal: CautionSignal, params: ChargeCaution['params'] = {}) =>
    cautions.push({ code, signal, params });
  const named = { refrigerant: designation, safetyClass };

  if (safetyClass.endsWith('3')) say('highlyFlammable', 'danger', named);
  else if (!safetyClass.endsWith('1')) say('flammable', 'warning', named);
  if (safetyClass.startsWith('B')) say('toxic', safetyClass === 'B1' ? 'warning' : 'danger', named);
  sayRoom(facts, figures.totalG, say);
  if (figures.recoverG > 0) say('recoverNeverVent', 'warning', { recoverG: figures.recoverG });
  if (request.job === 'fullRecharge') say('compressorUnderVacuum', 'warning');
  if (figures.weighInG > 0) {
    if (refrigerant.composition) say('blendAsLiquid', 'caution', { refrigerant: designation });
    say('frostbite', 'caution');
  }
  const { kind } = request.basis.rate;
  if (TOOK_THE_PLACE_OF_R410A.has(designation) && (kind === 'flat' || kind === 'byLiquidPipe')) {
    say('rateForThisRefrigerant', 'notice', { refrigerant: designation });
  }
  say('manualGoverns', 'notice');
  return cautions.sort((a, b) => ORDER[a.signal] - ORDER[b.signal]);
}

/** Whether the room has to be looked at, by the circuit's whole charge. A figure from memory never clears a room barely. */
function sayRoom(
  facts: RefrigerantFacts,
  totalG: number,
  say: (code: ChargeCaution['code'], signal: CautionSignal, params?: ChargeCaution['params']) => void,
): void {
  const { refrigerant, noRoomCheckUpToG } = facts;
  if (refrigerant.safetyClass.endsWith('1')) return;
  if (noRoomCheckUpToG === null) {
    say('roomByLocalCode', 'warning', { refrigerant: refrigerant.designation });
    return;
  }
  const params = { refrigerant: refrigerant.designation, totalG, m1G: roundTo(noRoomCheckUpToG, 0) };
  const isConfirmed = refrigerant.lflStatus?.startsWith('yes') ?? false;
  if (totalG > noRoomCheckUpToG) {
    say(isConfirmed ? 'roomCheckNeeded' : 'roomCheckNeededToBeConfirmed', 'warning', params);
  } else say(isConfirmed ? 'noRoomCheck' : 'noRoomCheckToBeConfirmed', 'notice', params);
}
