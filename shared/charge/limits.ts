import type { Refusal } from '../problems/outcome.ts';
import type { ChargeBasis } from './charge.schema.ts';
import type { ChargeWarning } from './charge-result.ts';
import { type Branch, type LineSet, pathToOutdoorUnit } from './line-set.ts';
import { difference, snapped, total } from './steps.ts';

export type ChargeLimits = NonNullable<ChargeBasis['limits']>;

/**
 * The manual's lengths. Beyond them it gives no charge, so they hold for a replaced line set too. A value equal to its
 * limit passes. Bends count for the longest lengths, not for the shortest (which is about charge).
 */
export function checkLengths(lineSet: LineSet, limits: ChargeLimits): Refusal[] {
  const refusals: Refusal[] = [];
  const { minLengthM, maxLengthM, maxBranchM } = limits;
  if (isSet(minLengthM) && lineSet.totalM < snapped(minLengthM)) {
    refusals.push(broken('lineTooShort', `${lineSet.path}/branches`, lineSet.totalM, minLengthM));
  }
  if (isSet(maxLengthM)) {
    const bendsM = total(lineSet.branches.map((branch) => branch.bendsM));
    const countedM = total([lineSet.totalM, bendsM]);
    if (countedM > snapped(maxLengthM)) {
      const params = { pipeM: lineSet.totalM, bendsM };
      refusals.push(broken('lineTooLong', `${lineSet.path}/branches`, countedM, maxLengthM, params));
    }
  }
  if (isSet(maxBranchM)) {
    for (const end of lineSet.ends) {
      const path = pathToOutdoorUnit(end);
      const pipeM = total(path.map((branch) => branch.lengthM));
      const bendsM = total(path.map((branch) => branch.bendsM));
      const countedM = total([pipeM, bendsM]);
      if (countedM > snapped(maxBranchM)) {
        const params = { branch: end.name, pipeM, bendsM };
        refusals.push(broken('branchTooLong', `${end.path}/lengthM`, countedM, maxBranchM, params));
      }
    }
  }
  return refusals;
}

/** The manual's heights, by the indoor units: the ends of the tree, rises added up along the path. */
export function checkHeights(
  lineSet: LineSet,
  limits: ChargeLimits,
): { refusals: Refusal[]; warnings: ChargeWarning[] } {
  const refusals: Refusal[] = [];
  const { maxRiseM, maxDropM } = limits;
  if (!isSet(maxRiseM) && !isSet(maxDropM)) return { refusals, warnings: [] };

  const unknown = new Set<string>();
  let highest: { end: Branch; heightM: number } | null = null;
  let lowest: { end: Branch; heightM: number } | null = null;
  for (const end of lineSet.ends) {
    const path = pathToOutdoorUnit(end);
    const notGiven = path.filter((branch) => branch.riseM === null);
    for (const branch of notGiven) unknown.add(branch.name);
    if (notGiven.length === path.length) continue;
    const heightM = total(path.map((branch) => branch.riseM ?? 0));
    if (isSet(maxRiseM) && Math.abs(heightM) > snapped(maxRiseM)) {
      refusals.push(broken('riseTooHigh', `${end.path}/riseM`, heightM, maxRiseM, { branch: end.name }));
    }
    if (!highest || heightM > highest.heightM) highest = { end, heightM };
    if (!lowest || heightM < lowest.heightM) lowest = { end, heightM };
  }
  if (isSet(maxDropM) && highest && lowest) {
    const apartM = difference(highest.heightM, lowest.heightM);
    if (apartM > snapped(maxDropM)) {
      const params = { highest: highest.end.name, lowest: lowest.end.name };
      refusals.push(broken('dropTooHigh', `${lowest.end.path}/riseM`, apartM, maxDropM, params));
    }
  }
  const asksForRises = isSet(maxRiseM) || lineSet.ends.length > 1;
  return {
    refusals,
    warnings:
      unknown.size > 0 && asksForRises
        ? [{ code: 'riseNotChecked', params: { branches: [...unknown].join(', ') } }]
        : [],
  };
}

/** The largest charge that the manual allows, against the rounded total that will be in the unit. */
export function checkTotalCharge(totalG: number, limits: ChargeLimits): Refusal[] {
  const { maxTotalChargeG } = limits;
  return isSet(maxTotalChargeG) && totalG > snapped(maxTotalChargeG)
    ? [broken('totalChargeTooHigh', '/basis/limits/maxTotalChargeG', totalG, maxTotalChargeG)]
    : [];
}

const isSet = (limit: number | null | undefined): limit is number => limit !== null && limit !== undefined;

function broken(
  code: string,
  path: string,
  given: number,
  allowed: number,
  params: Record<string, string | number> = {},
): Refusal {
  return { code, path, given, allowed, params: { given, allowed, ...params } };
}
