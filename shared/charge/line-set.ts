import { done, type Outcome, type Refusal } from '../problems/outcome.ts';
import type { LineSetRequest } from './charge.schema.ts';
import type { PipeSize, PipeSizes } from './pipe-size.ts';
import { snapped, total } from './steps.ts';

export interface Branch {
  name: string;
  /** JSON Pointer of this branch in the request. */
  path: string;
  parent: Branch | null;
  hasChildren: boolean;
  odMm: number;
  /** null: no nominal pipe has this diameter. */
  size: PipeSize | null;
  lengthM: number;
  riseM: number | null;
  /** bends x equivalent length per bend: for the longest lengths only. */
  bendsM: number;
}

/** All branches of one nominal size. */
export interface SizeRun {
  size: PipeSize;
  lengthsM: number[];
  totalM: number;
}

export interface LineSet {
  /** JSON Pointer of the line set in the request. */
  path: string;
  branches: readonly Branch[];
  lengthsM: readonly number[];
  totalM: number;
  /** Branches without children: one for each indoor unit. */
  ends: readonly Branch[];
}

/** Reads the pipe tree; refuses a name that stands twice, a parent that does not exist, and pipes that lead in a ring. */
export function readLineSet(request: LineSetRequest, path: string, sizes: PipeSizes): Outcome<LineSet> {
  const refusals: Refusal[] = [];
  const byName = new Map<string, Branch>();
  const lengthsM: number[] = [];
  const branches = request.branches.map((given, index): Branch => {
    const branch: Branch = {
      name: given.name,
      path: `${path}/branches/${index}`,
      parent: null,
      hasChildren: false,
      odMm: given.liquidOdMm,
      size: sizes.find(given.liquidOdMm),
      lengthM: snapped(given.lengthM),
      riseM: given.riseM ?? null,
      bendsM: snapped((given.bends ?? 0) * (given.equivalentMPerBend ?? 0)),
    };
    lengthsM.push(branch.lengthM);
    if (byName.has(given.name)) {
      refusals.push({
        code: 'branchNameTwice',
        path: `${branch.path}/name`,
        given: given.name,
        params: { given: given.name },
      });
    } else byName.set(given.name, branch);
    return branch;
  });

  for (const [index, given] of request.branches.entries()) {
    if (given.parent === null || given.parent === undefined) continue;
    const branch = branches[index] as Branch;
    const parent = byName.get(given.parent);
    if (parent) {
      branch.parent = parent;
      parent.hasChildren = true;
    } else {
      const others = branches.filter((other) => other !== branch).map((other) => other.name);
      refusals.push({
        code: 'branchParentUnknown',
        path: `${branch.path}/parent`,
        given: given.parent,
        allowed: others,
        params: { given: given.parent, branch: branch.name },
      });
    }
  }
  for (const branch of branches) {
    if (leadsToItself(branch)) {
      refusals.push({
        code: 'branchParentRing',
        path: `${branch.path}/parent`,
        given: branch.parent?.name ?? null,
        params: { given: branch.parent?.name ?? '', branch: branch.name },
      });
    }
  }
  if (refusals.length > 0) return { ok: false, refusals };
  return done({
    path,
    branches,
    lengthsM,
    totalM: total(lengthsM),
    ends: branches.filter((branch) => !branch.hasChildren),
  });
}

function leadsToItself(branch: Branch): boolean {
  const seen = new Set<Branch>();
  for (let up = branch.parent; up && !seen.has(up); up = up.parent) {
    if (up === branch) return true;
    seen.add(up);
  }
  return false;
}

/** From this branch back to the outdoor unit. */
export function pathToOutdoorUnit(branch: Branch): Branch[] {
  const path: Branch[] = [];
  for (let up: Branch | null = branch; up; up = up.parent) path.push(up);
  return path;
}

/** Lengths by nominal size, in the order of first appearance; branches without a nominal are left to the caller. */
export function runsBySize(lineSet: LineSet): SizeRun[] {
  const runs = new Map<PipeSize, SizeRun>();
  for (const { size, lengthM } of lineSet.branches) {
    if (!size) continue;
    const run = runs.get(size);
    if (run) run.lengthsM.push(lengthM);
    else runs.set(size, { size, lengthsM: [lengthM], totalM: 0 });
  }
  const list = [...runs.values()];
  for (const run of list) run.totalM = total(run.lengthsM);
  return list;
}
