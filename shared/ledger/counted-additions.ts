import { type JudgedGroup, timelineOf } from './judged-group.ts';
import { massOf, smaller } from './mass-by-refrigerant.ts';
import { unitFlowOf } from './unit-flow.ts';
import type { DatedFullCharge, UnitRegister } from './unit-state.ts';

/** How much a unit's full charge rose in a job. `jobKey` as `jobKeyOf` writes it. */
export interface FullChargeRise {
  readonly jobKey: string;
  readonly refrigerant: string;
  readonly massMicrograms: bigint;
}

export interface CountedAddition {
  readonly groupId: string;
  readonly jobId: string | null;
  /** The regulatory day is the site's calendar day of this instant. */
  readonly occurredAt: number;
  readonly refrigerant: string;
  readonly putInMicrograms: bigint;
  /** What counts for the leak rate: put in, less recovered, less the rise of full charge; never below zero. */
  readonly countedMicrograms: bigint;
}

const INSTALL = 'install';

/**
 * The job of a group. Groups without a job stand each by itself, but for extra charges: these belong together to the
 * install, which their line set's full charge belongs to as well.
 */
export const jobKeyOf = (group: Pick<JudgedGroup, 'id' | 'jobId' | 'kind'>): string => {
  if (group.jobId !== null) return `job:${group.jobId}`;
  return group.kind === 'extraCharge' ? INSTALL : `group:${group.id}`;
};

/**
 * Rises of full charge, by job. A later full charge of a refrigerant rises above the one before, in the job that names
 * it. The first one of a unit new from the factory rises above the factory charge, in its own job, else in the job of the
 * unit's first extra charge. The first one of a refrigerant that the unit was changed to rises from nothing.
 */
export function fullChargeRises(register: UnitRegister, groups: readonly JudgedGroup[]): FullChargeRise[] {
  const rises: FullChargeRise[] = [];
  const refrigerants = register.refrigerants.toSorted((a, b) => a.validFrom - b.validFrom);
  for (const refrigerant of new Set(register.fullCharges.map((fullCharge) => fullCharge.refrigerant))) {
    const dated = register.fullCharges
      .filter((fullCharge) => fullCharge.refrigerant === refrigerant)
      .toSorted((a, b) => a.validFrom - b.validFrom);
    dated.forEach((fullCharge, index) => {
      const earlier = dated[index - 1];
      const isFirstRefrigerant = refrigerants[0]?.refrigerant === refrigerant;
      const base = earlier?.massMicrograms ?? (isFirstRefrigerant ? factoryCharge(register, groups, refrigerant) : 0n);
      const jobKey = riseJobKey(fullCharge, earlier === undefined, register, groups);
      if (base === null || jobKey === null || fullCharge.massMicrograms <= base) return;
      rises.push({ jobKey, refrigerant, massMicrograms: fullCharge.massMicrograms - base });
    });
  }
  return rises;
}

/** Null where the unit did not come into the books new from the factory. */
function factoryCharge(register: UnitRegister, groups: readonly JudgedGroup[], refrigerant: string): bigint | null {
  for (const group of timelineOf(groups)) {
    const fromFactory = group.masses.find(
      ({ from, to, ...mass }) =>
        from.place === 'factory' &&
        to.place === 'unit' &&
        to.id === register.unitId &&
        mass.refrigerant === refrigerant,
    );
    if (fromFactory) return fromFactory.massMicrograms;
  }
  return null;
}

function riseJobKey(
  fullCharge: DatedFullCharge,
  isFirst: boolean,
  register: UnitRegister,
  groups: readonly JudgedGroup[],
): string | null {
  if (fullCharge.jobId !== null) return `job:${fullCharge.jobId}`;
  if (!isFirst) return null;
  const install = timelineOf(groups).find(
    (group) =>
      group.kind === 'extraCharge' && group.masses.some(({ to }) => to.place === 'unit' && to.id === register.unitId),
  );
  return install ? jobKeyOf(install) : null;
}

/**
 * The additions of one unit as the leak rate counts them: what was put in, not from the factory, less what the same job
 * recovered from the unit, less the rise of its full charge in that job, not below zero. What is deducted comes off the
 * job's latest additions first: what was recovered and put back is put back at the end. A loss taken back changes none.
 */
export function countedAdditions(
  unitId: string,
  groups: readonly JudgedGroup[],
  rises: readonly FullChargeRise[],
): CountedAddition[] {
  const additions: (CountedAddition & { jobKey: string })[] = [];
  const deductions = new Map<string, bigint>();
  const deduct = (jobKey: string, refrigerant: string, massMicrograms: bigint): void => {
    const key = `${jobKey}|${refrigerant}`;
    deductions.set(key, (deductions.get(key) ?? 0n) + massMicrograms);
  };
  for (const rise of rises) deduct(rise.jobKey, rise.refrigerant, rise.massMicrograms);
  for (const group of timelineOf(groups)) {
    const jobKey = jobKeyOf(group);
    const flow = unitFlowOf(group, unitId);
    for (const mass of group.masses) {
      const recovered = mass.from.place === 'unit' && mass.from.id === unitId && mass.to.place === 'cylinder';
      if (recovered) deduct(jobKey, mass.refrigerant, mass.massMicrograms);
    }
    for (const refrigerant of Object.keys(flow.additions)) {
      const putInMicrograms = massOf(flow.additions, refrigerant);
      additions.push({
        groupId: group.id,
        jobId: group.jobId,
        jobKey,
        occurredAt: group.occurredAt,
        refrigerant,
        putInMicrograms,
        countedMicrograms: putInMicrograms,
      });
    }
  }
  return additions
    .toReversed()
    .map(({ jobKey, ...addition }) => {
      const key = `${jobKey}|${addition.refrigerant}`;
      const deducted = smaller(deductions.get(key) ?? 0n, addition.putInMicrograms);
      deductions.set(key, (deductions.get(key) ?? 0n) - deducted);
      return { ...addition, countedMicrograms: addition.putInMicrograms - deducted };
    })
    .toReversed();
}
