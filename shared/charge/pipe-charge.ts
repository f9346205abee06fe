import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import { type LineSet, runsBySize } from './line-set.ts';
import type { PipeSize } from './pipe-size.ts';
import type { Rule } from './rate.ts';
import { difference, grams, gramsPerMetre, metres, note, snapped, sumText, type Trace, total } from './steps.ts';

/** Pipes that are charged at one rate. `size` is null for a flat rate, which holds whatever the size. */
interface Group {
  size: PipeSize | null;
  lengthsM: readonly number[];
  totalM: number;
  gPerM: number;
}

type Precharge = NonNullable<Rule['precharge']>;

/** g for the pipe by length and rate, with what the factory charge serves taken off; below zero for a short line. */
export function pipeCharge(lineSet: LineSet, groups: readonly Group[], rule: Rule, trace: Trace): Outcome<number> {
  const { precharge } = rule;
  if (precharge?.scope === 'branch') return done(chargeByBranch(lineSet, groups, precharge.lengthM, rule, trace));
  if (precharge?.scope === 'system' || precharge?.scope === 'systemPerBranch') {
    const sharedM = sharedLengthM(lineSet, precharge, trace);
    return sharedM > 0
      ? chargeBeyondShared(lineSet, groups, sharedM, precharge.allocation ?? null, rule, trace)
      : done(chargeOfGroups(lineSet, groups, trace));
  }
  return done(chargeOfGroups(lineSet, groups, trace));
}

export function flatGroups(lineSet: LineSet, gPerM: number): Group[] {
  return [{ size: null, lengthsM: lineSet.lengthsM, totalM: lineSet.totalM, gPerM }];
}

/** Refuses a branch whose size has no rate. */
export function sizeGroups(lineSet: LineSet, rate: Extract<Rule['rate'], { kind: 'byLiquidPipe' }>): Outcome<Group[]> {
  const refusals: Refusal[] = [];
  for (const branch of lineSet.branches) {
    if (branch.size && rate.gPerM.has(branch.size)) continue;
    refusals.push({
      code: 'sizeWithoutRate',
      path: `${branch.path}/liquidOdMm`,
      given: branch.odMm,
      allowed: rate.odsMm,
      params: { branch: branch.name, given: branch.odMm, allowed: rate.odsMm.join(', ') },
    });
  }
  if (refusals.length > 0) return { ok: false, refusals };
  return done(runsBySize(lineSet).map((run) => ({ ...run, gPerM: rate.gPerM.get(run.size) as number })));
}

/** `system`: as given; `systemPerBranch`: for each branch without children. */
export function sharedLengthM(
  lineSet: LineSet,
  precharge: Exclude<Precharge, { scope: 'mass' }>,
  trace: Trace,
): number {
  if (precharge.scope === 'system') return snapped(precharge.lengthM);
  // `branch`: each branch has its own, so their number is that of all pipes.
  const count = precharge.scope === 'branch' ? lineSet.branches.length : lineSet.ends.length;
  const sharedM = snapped(count * precharge.lengthM);
  return note(trace, 'sharedLength', `${count} x ${metres(precharge.lengthM)}`, sharedM, 'm', 'precharge');
}

function chargeOfGroups(lineSet: LineSet, groups: readonly Group[], trace: Trace): number {
  const charges = groups.map((group) => chargeOf(group, lengthOf(lineSet, group, trace), trace));
  return lineSum(charges, trace);
}

function chargeBeyondShared(
  lineSet: LineSet,
  groups: readonly Group[],
  sharedM: number,
  allocation: Exclude<Precharge, { scope: 'mass' }>['allocation'],
  rule: Rule,
  trace: Trace,
): Outcome<number> {
  const used = groups.filter((group) => group.totalM > 0);
  const only = used.length > 1 ? null : (used[0] ?? groups[0]);
  if (only) {
    const lengthM = lengthOf(lineSet, only, trace);
    const beyondM = difference(lengthM, sharedM);
    note(trace, 'lengthBeyond', `${metres(lengthM)} - ${metres(sharedM)}`, beyondM, 'm', 'precharge');
    return done(chargeOf(only, beyondM, trace));
  }
  if (!allocation) {
    const allowed = ['proportional', 'largestFirst', 'smallestFirst'];
    return refused({ code: 'allocationMissing', path: '/basis/precharge/allocation', given: null, allowed });
  }
  if (sharedM > lineSet.totalM && rule.mayRemove) {
    const params = { given: sharedM, allowed: lineSet.totalM };
    return refused({ code: 'allocationBeyondLine', path: '/basis/precharge/lengthM', ...params, params });
  }
  if (sharedM >= lineSet.totalM) {
    const text = `max(0 m, ${metres(lineSet.totalM)} - ${metres(sharedM)})`;
    return done(note(trace, 'lengthBeyond', text, 0, 'm', 'precharge'));
  }
  const beyond =
    allocation === 'proportional'
      ? beyondInProportion(lineSet, used, sharedM, trace)
      : beyondInOrder(lineSet, used, sharedM, allocation, trace);
  return done(
    lineSum(
      beyond.map(({ group, beyondM }) => chargeOf(group, beyondM, trace)),
      trace,
    ),
  );
}

interface Beyond {
  group: Group;
  beyondM: number;
}

function beyondInProportion(lineSet: LineSet, groups: readonly Group[], sharedM: number, trace: Trace): Beyond[] {
  return groups.map((group) => {
    const lengthM = lengthOf(lineSet, group, trace);
    // One division at the end: length x (all - shared) / all loses nothing to a rounded share.
    const beyondM = snapped((lengthM * difference(lineSet.totalM, sharedM)) / lineSet.totalM);
    const text = `${metres(lengthM)} - ${metres(sharedM)} x ${metres(lengthM)} / ${metres(lineSet.totalM)}`;
    note(trace, 'sizeLengthBeyond', text, beyondM, 'm', 'precharge', sizeParams(group));
    return { group, beyondM };
  });
}

function beyondInOrder(
  lineSet: LineSet,
  groups: readonly Group[],
  sharedM: number,
  allocation: 'largestFirst' | 'smallestFirst',
  trace: Trace,
): Beyond[] {
  const sign = allocation === 'largestFirst' ? -1 : 1;
  const ordered = [...groups].sort((a, b) => sign * ((a.size?.odMm ?? 0) - (b.size?.odMm ?? 0)));
  let leftM = sharedM;
  return ordered.map((group) => {
    const lengthM = lengthOf(lineSet, group, trace);
    const takenM = Math.min(leftM, lengthM);
    leftM = difference(leftM, takenM);
    const beyondM = difference(lengthM, takenM);
    const text = `${metres(lengthM)} - ${metres(takenM)}`;
    note(trace, 'sizeLengthBeyond', text, beyondM, 'm', 'precharge', sizeParams(group));
    return { group, beyondM };
  });
}

function chargeByBranch(
  lineSet: LineSet,
  groups: readonly Group[],
  prechargeM: number,
  rule: Rule,
  trace: Trace,
): number {
  const ownM = snapped(prechargeM);
  const charges = lineSet.branches.map((branch) => {
    const group = groups.find(({ size }) => size === null || size === branch.size) as Group;
    const beyondM = difference(branch.lengthM, ownM);
    const countedM = rule.mayRemove ? beyondM : Math.max(0, beyondM);
    const lengths = `${metres(branch.lengthM)} - ${metres(ownM)}`;
    const text = `${rule.mayRemove ? `(${lengths})` : `max(0 m, ${lengths})`} x ${gramsPerMetre(group.gPerM)}`;
    const charge = snapped(countedM * group.gPerM);
    return note(trace, 'branchCharge', text, charge, 'g', 'rate', { branch: branch.name });
  });
  return lineSum(charges, trace);
}

const sizeParams = ({ size }: Group) => ({ odMm: size?.odMm ?? 0 });

function lengthOf(lineSet: LineSet, group: Group, trace: Trace): number {
  if (group.lengthsM.length > 1) {
    const code = group.totalM === lineSet.totalM && group.size === null ? 'totalLength' : 'sizeLength';
    note(trace, code, sumText(group.lengthsM, metres), group.totalM, 'm', 'lineSet', sizeParams(group));
  }
  return group.totalM;
}

function chargeOf(group: Group, lengthM: number, trace: Trace): number {
  const text = `${metres(lengthM)} x ${gramsPerMetre(group.gPerM)}`;
  const charge = snapped(lengthM * group.gPerM);
  return note(trace, group.size ? 'sizeCharge' : 'lineCharge', text, charge, 'g', 'rate', sizeParams(group));
}

function lineSum(charges: readonly number[], trace: Trace): number {
  const sum = total(charges);
  return charges.length > 1 ? note(trace, 'lineSum', sumText(charges, grams), sum, 'g', 'arithmetic') : sum;
}
