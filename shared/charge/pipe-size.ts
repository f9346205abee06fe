import { findUsualTube, nearestByOd } from '../reference/find-tube.ts';
import type { Tube } from '../reference/tube.ts';
import { snap12 } from '../units/round.ts';

/** A nominal liquid pipe: 9.5, 9.52, 9.525 and 9.53 mm are one. */
export interface PipeSize {
  odMm: number;
  /** Its length's name in a manual's formula: L and round(OD x 100), `L952`. */
  name: string;
  /** The EN 12735-1 tube with its usual wall; null for the two largest inch sizes, which that standard's table lacks. */
  tube: Tube | null;
}

export interface PipeSizes {
  /** Ascending. */
  all: readonly PipeSize[];
  /** Ascending, in mm: what a refusal offers. */
  odsMm: readonly number[];
  /** `L635` and so on. */
  names: ReadonlySet<string>;
  /** The nearest nominal within 0.15 mm, else null. */
  find(odMm: number): PipeSize | null;
}

/** What people type are a few dozen diameters; the bound is against a stranger who tries them all. */
const MAX_REMEMBERED = 1000;
const remembered = new WeakMap<readonly Tube[], PipeSizes>();

export function pipeSizes(tubes: readonly Tube[]): PipeSizes {
  const known = remembered.get(tubes);
  if (known) return known;
  const made = makePipeSizes(tubes);
  remembered.set(tubes, made);
  return made;
}

function makePipeSizes(tubes: readonly Tube[]): PipeSizes {
  const byOd = new Map<number, PipeSize>();
  for (const tube of tubes) {
    const usual = findUsualTube(tubes, tube.odMm);
    const odMm = usual?.odMm ?? tube.odMm;
    if (!byOd.has(odMm)) byOd.set(odMm, { odMm, name: `L${Math.round(snap12(odMm * 100))}`, tube: usual });
  }
  const all = [...byOd.values()].sort((a, b) => a.odMm - b.odMm);
  const found = new Map<number, PipeSize | null>();
  return {
    all,
    odsMm: all.map((size) => size.odMm),
    names: new Set(all.map((size) => size.name)),
    find(odMm) {
      const earlier = found.get(odMm);
      if (earlier !== undefined) return earlier;
      // A nominal of EN 12735-1 first: 7.94 mm (5/16 in) is charged as that standard's 8 mm.
      const usual = findUsualTube(tubes, odMm);
      const size = usual ? (byOd.get(usual.odMm) ?? null) : nearestByOd(all, (candidate) => candidate.odMm, odMm);
      if (found.size >= MAX_REMEMBERED) found.clear();
      found.set(odMm, size);
      return size;
    },
  };
}
