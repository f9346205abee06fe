import type { Refrigerant } from '../reference/refrigerant.ts';
import type { RoomLimitRequest, RoomStandard } from './room-limit.schema.ts';

/** Whether a figure was read or reproduced from a published one, or written from memory of the standard. */
export type FigureStatus = 'seen' | 'memory';

export interface ClassFigures {
  /** m1, m2, m3 are these volumes in m3 times the LFL. */
  m1M3: number;
  m2M3: number;
  m3M3: number;
  m1Status: FigureStatus;
  /** Of m2 and m3. */
  m2m3Status: FigureStatus;
  /** Of the area formula for this class. */
  areaStatus: FigureStatus;
}

interface StandardFigures {
  hasLinearCap: boolean;
  A2L: ClassFigures;
  /** A2 and A3. */
  A3: ClassFigures;
}

/** Appliance standard, editions 6 (2018) and 7 (2022). The area table of A2L was reproduced; that of A3 was not seen. */
const IEC: StandardFigures = {
  hasLinearCap: true,
  A2L: { m1M3: 6, m2M3: 52, m3M3: 260, m1Status: 'seen', m2m3Status: 'seen', areaStatus: 'seen' },
  A3: { m1M3: 4, m2M3: 26, m3M3: 130, m1Status: 'seen', m2m3Status: 'seen', areaStatus: 'memory' },
};

/**
 * EN 378-1 has a third pair of factors for A2L (39 and 195, 1.5 times those of A3), reproduced from trade literature.
 * Its area form comes without the cap: a manual that cites it prints the pure square form.
 */
const EN: StandardFigures = {
  hasLinearCap: false,
  A2L: { m1M3: 6, m2M3: 39, m3M3: 195, m1Status: 'seen', m2m3Status: 'seen', areaStatus: 'seen' },
  A3: { m1M3: 4, m2M3: 26, m3M3: 130, m1Status: 'memory', m2m3Status: 'memory', areaStatus: 'memory' },
};

const FIGURES: Readonly<Record<RoomStandard, StandardFigures>> = {
  'IEC 60335-2-40:2018': IEC,
  'IEC 60335-2-40:2022': IEC,
  'EN 378-1': EN,
};

export const hasLinearCap = (standard: RoomStandard) => FIGURES[standard].hasLinearCap;

/** null: the standard's factors are not for this class (not flammable, or of toxicity class B). */
export function findClassFigures(standard: RoomStandard, safetyClass: Refrigerant['safetyClass']): ClassFigures | null {
  if (safetyClass === 'A2L') return FIGURES[standard].A2L;
  if (safetyClass === 'A2' || safetyClass === 'A3') return FIGURES[standard].A3;
  return null;
}

/** m. IEC 60335-2-40 Annex GG and EN 378-1; that the printed 1.0 m means a window unit is from memory. */
const RELEASE_HEIGHTS_M = { floor: 0.6, window: 1, wall: 1.8, ceiling: 2.2 } as const;
const SEEN_HEIGHTS_M: readonly number[] = Object.values(RELEASE_HEIGHTS_M);

/** null: neither a height nor a mounting was given. */
export function findReleaseHeight(
  request: Pick<RoomLimitRequest, 'releaseHeightM' | 'mounting'>,
): { heightM: number; status: FigureStatus } | null {
  const { releaseHeightM, mounting } = request;
  if (releaseHeightM != null) {
    return { heightM: releaseHeightM, status: SEEN_HEIGHTS_M.includes(releaseHeightM) ? 'seen' : 'memory' };
  }
  if (mounting == null) return null;
  return { heightM: RELEASE_HEIGHTS_M[mounting], status: mounting === 'window' ? 'memory' : 'seen' };
}
