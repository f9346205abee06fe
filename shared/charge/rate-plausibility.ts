import type { ChargeResult, ChargeWarning } from './charge-result.ts';
import type { LineSet } from './line-set.ts';
import type { PipeSize } from './pipe-size.ts';
import type { Rule } from './rate.ts';
import { PLAUSIBILITY_TEMP_C, type RefrigerantFacts } from './refrigerant-facts.ts';
import { note, plain, snapped, type Trace } from './steps.ts';

/**
 * Holds the rate as typed against what the pipe can hold: liquid at 40 °C in the usual wall of EN 12735-1, 0.4 to 1.7
 * times. It catches oz/ft typed as g/m and most doublings. It advises; the manual rules. A rate equal to a bound as
 * shown is plausible. Brackets, formulas and a fixed mass have no rate to compare.
 */
export function judgeRate(
  lineSet: LineSet,
  rate: Rule['rate'],
  facts: RefrigerantFacts,
  trace: Trace,
  warnings: ChargeWarning[],
): ChargeResult['ratePlausibility'] {
  if (rate.kind !== 'flat' && rate.kind !== 'byLiquidPipe') return [];
  const { designation } = facts.refrigerant;
  if (facts.liquidDensityKgM3 === null) {
    warnings.push({ code: 'plausibilityNotKnown', params: { refrigerant: designation, tempC: PLAUSIBILITY_TEMP_C } });
    return [];
  }
  if (facts.isDensityDoubtful) warnings.push({ code: 'plausibilityDoubtful', params: { refrigerant: designation } });
  const judged: ChargeResult['ratePlausibility'] = [];
  const told = new Set<PipeSize | number>();
  for (const { name, size, odMm } of lineSet.branches) {
    const isNew = !told.has(size ?? odMm);
    told.add(size ?? odMm);
    const band = size ? facts.band(size) : null;
    if (!size || !band) {
      if (isNew) warnings.push({ code: 'plausibilityNotKnownForSize', params: { odMm } });
      continue;
    }
    const gPerM = snapped(rate.kind === 'flat' ? rate.gPerM : (rate.gPerM.get(size) as number));
    const { lowGPerM, highGPerM, contentGPerM } = band;
    const verdict = gPerM < lowGPerM ? 'tooLow' : gPerM > highGPerM ? 'tooHigh' : 'plausible';
    judged.push({ branch: name, lowGPerM, highGPerM, verdict });
    if (!isNew) continue;
    const text = `${plain(size.tube?.internalAreaMm2 ?? 0)} mm2 x ${plain(facts.liquidDensityKgM3)} kg/m3 / 1000`;
    note(trace, 'pipeContent', text, contentGPerM, 'g/m', 'tube', { odMm: size.odMm, refrigerant: designation });
    if (verdict !== 'plausible') {
      const params = { gPerM, lowGPerM, highGPerM, odMm: size.odMm, refrigerant: designation };
      warnings.push({ code: verdict === 'tooLow' ? 'rateTooLow' : 'rateTooHigh', params });
    }
  }
  return judged;
}
