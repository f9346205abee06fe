import type { Translate } from '../../lib/messages.ts';
import type { Pointer } from './draft-to-request.ts';

const LABELS: readonly [RegExp, string][] = [
  [/^\/basis\/refrigerant$/, 'chargeScreen.refrigerant'],
  [/^\/basis\/factoryChargeG$/, 'chargeScreen.factoryCharge'],
  [/\/liquidOdMm$/, 'chargeScreen.liquidPipe'],
  [/^\/previousLineSet\/branches\/\d+\/lengthM$/, 'chargeScreen.previousRun'],
  [/branches\/\d+\/lengthM$/, 'chargeScreen.run'],
  [/branches\/\d+\/name$/, 'chargeScreen.pipeName'],
  [/\/riseM$/, 'chargeScreen.rise'],
  [/\/bends$/, 'chargeScreen.bends'],
  [/\/equivalentMPerBend$/, 'chargeScreen.equivalent'],
  [/^\/previousLineSet$/, 'chargeScreen.previousPipes'],
  [/^\/basis\/precharge\/lengthM$/, 'chargeScreen.precharge'],
  [/^\/basis\/precharge\/massG$/, 'chargeScreen.prechargeMass'],
  [/^\/basis\/rate\/sizes/, 'chargeScreen.rateBySize'],
  [/^\/basis\/rate\/steps/, 'chargeScreen.brackets'],
  [/^\/basis\/rate\/expression$/, 'chargeScreen.formula'],
  [/^\/basis\/rate\/extraG$/, 'chargeScreen.fixedMass'],
  [/^\/basis\/rate/, 'chargeScreen.rate'],
  [/^\/basis\/allowances/, 'chargeScreen.allowance'],
  [/^\/basis\/limits/, 'chargeScreen.limits'],
  [/^\/basis\/rounding/, 'chargeScreen.roundTo'],
];

/** The name that a field has on screen, by its place in the request. */
export function labelOfField(pointer: Pointer, t: Translate): string {
  const found = LABELS.find(([pattern]) => pattern.test(pointer));
  return found ? t(found[1]) : pointer;
}
