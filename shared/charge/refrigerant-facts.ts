import type { Outcome } from '../problems/outcome.ts';
import type { GwpSet } from '../reference/gwp.ts';
import { type Gwp, gwpOfRefrigerant } from '../reference/gwp-of-blend.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import type { Refrigerant } from '../reference/refrigerant.ts';
import { liquidDensityKgM3 } from '../reference/saturation.ts';
import { findClassFigures } from '../room-limit/standard-figures.ts';
import { roundTo, snap12 } from '../units/round.ts';
import type { PipeSize } from './pipe-size.ts';

/** What a metre of full pipe holds, and which rates are plausible beside it. */
export interface Band {
  contentGPerM: number;
  lowGPerM: number;
  highGPerM: number;
}

/** What the tables say about one refrigerant, worked out once. */
export interface RefrigerantFacts {
  refrigerant: Refrigerant;
  /** kg/m3 of saturated liquid at 40 °C; null where the table has no such row or is not loaded. */
  liquidDensityKgM3: number | null;
  /** The table says of itself that its densities may be off. */
  isDensityDoubtful: boolean;
  /** The largest charge that needs no room check, IEC 60335-2-40:2018; null where that standard's sum is not for this class. */
  noRoomCheckUpToG: number | null;
  band(size: PipeSize): Band | null;
  gwp(set: GwpSet): Outcome<Gwp>;
  versions: Readonly<Record<string, string>>;
}

/** State of the liquid in the comparison, and the width of the band around it. */
export const PLAUSIBILITY_TEMP_C = 40;
/** Passes every published rate that was compared, and catches oz/ft typed as g/m; no standard. */
const LOW_SHARE = 0.4;
const HIGH_SHARE = 1.7;

/** Named in the sentences about the room. */
const NO_ROOM_CHECK_STANDARD = 'IEC 60335-2-40:2018';

/** Of the arithmetic in this folder; raised when the same request would give another figure. */
export const CHARGE_RULES_VERSION = '1';

const remembered = new WeakMap<ReferenceData, Map<string, RefrigerantFacts>>();

/** null: no such refrigerant. */
export function findRefrigerantFacts(reference: ReferenceData, designation: string): RefrigerantFacts | null {
  let facts = remembered.get(reference);
  if (!facts) {
    facts = new Map();
    remembered.set(reference, facts);
  }
  const known = facts.get(designation);
  if (known) return known;
  const refrigerant = reference.findRefrigerant(designation);
  if (!refrigerant) return null;
  const made = makeFacts(reference, refrigerant);
  // A browser loads one saturation table at a time: what lacks it now may have it at the next call.
  if (reference.findSaturationTable(designation)) facts.set(designation, made);
  return made;
}

function makeFacts(reference: ReferenceData, refrigerant: Refrigerant): RefrigerantFacts {
  const table = reference.findSaturationTable(refrigerant.designation);
  const density = table ? liquidDensityKgM3(table, PLAUSIBILITY_TEMP_C, { path: '' }) : null;
  const densityKgM3 = density?.ok ? density.value : null;
  const m1M3 = findClassFigures(NO_ROOM_CHECK_STANDARD, refrigerant.safetyClass)?.m1M3;
  const { lflKgM3 } = refrigerant;
  const bands = new Map<PipeSize, Band | null>();
  const gwps = new Map<GwpSet, Outcome<Gwp>>();
  const { versions } = reference;

  const used: Record<string, string> = { chargeRules: CHARGE_RULES_VERSION };
  for (const name of ['refrigerants', 'tubes', 'gwp']) {
    const version = versions[name];
    if (version !== undefined) used[name] = version;
  }
  if (table) used[`saturation/${refrigerant.designation}`] = table.version;

  return {
    refrigerant,
    liquidDensityKgM3: densityKgM3,
    isDensityDoubtful: table?.confidence === 'low',
    noRoomCheckUpToG: m1M3 !== undefined && lflKgM3 !== null ? snap12(m1M3 * lflKgM3 * 1000) : null,
    band(size) {
      let band = bands.get(size);
      if (band === undefined) {
        band = densityKgM3 !== null && size.tube ? bandOf(size.tube.internalAreaMm2, densityKgM3) : null;
        bands.set(size, band);
      }
      return band;
    },
    gwp(set) {
      let gwp = gwps.get(set);
      if (!gwp) {
        gwp = gwpOfRefrigerant(reference, refrigerant.designation, set);
        gwps.set(set, gwp);
      }
      return gwp;
    },
    versions: used,
  };
}

/** kg/m3 x mm2 / 1000 = g/m (geometry). */
function bandOf(areaMm2: number, densityKgM3: number): Band {
  const contentGPerM = snap12((densityKgM3 * areaMm2) / 1000);
  return {
    contentGPerM,
    lowGPerM: roundTo(contentGPerM * LOW_SHARE, 1),
    highGPerM: roundTo(contentGPerM * HIGH_SHARE, 1),
  };
}
