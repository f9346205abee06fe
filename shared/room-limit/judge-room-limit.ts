import { asReturned } from '../calculations/decimals.ts';
import { done, type Outcome, type Refusal, refused } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import type { Refrigerant } from '../reference/refrigerant.ts';
import { requireRefrigerant } from '../reference/require-row.ts';
import { snap12 } from '../units/round.ts';
import { capGovernsBelowM2, largestChargeG, type RoomFormula, smallestAreaM2 } from './area-formula.ts';
import { readManualTable } from './manual-table.ts';
import {
  DEFAULT_ROOM_STANDARD,
  type RoomLimitRequest,
  type RoomLimitResponse,
  type RoomStandard,
} from './room-limit.schema.ts';
import {
  type ClassFigures,
  type FigureStatus,
  findClassFigures,
  findReleaseHeight,
  hasLinearCap,
} from './standard-figures.ts';

/** One question with everything that it needs looked up. */
interface Room {
  standard: RoomStandard;
  figures: ClassFigures;
  formula: RoomFormula;
  chargeG: number;
  areaM2: number | null;
  m1G: number;
  m2G: number;
  m3G: number;
  lflStatus: FigureStatus;
  heightStatus: FigureStatus;
}

const NO_FIGURES = {
  m1G: null,
  m2G: null,
  m3G: null,
  formulaLimitG: null,
  limitG: null,
  limitGovernedBy: null,
  minimumAreaM2: null,
  minimumAreaGovernedBy: null,
} as const;

/**
 * The charge of one circuit with a flammable refrigerant against an unventilated room.
 *
 * The manual's own table governs where one is given. Else IEC 60335-2-40 (2018 and 2022: square-root form and linear
 * cap) or EN 378-1 (square-root form). Whatever rests on a figure from memory is `toBeConfirmed`, and never a bare
 * `allowed`.
 *
 * Refuses `unknownRefrigerant`, `classNotCovered` (toxic and flammable: ammonia), `exactlyOneOf` (height and mounting),
 * `notAscending` and `tableEndsShort`.
 */
export function judgeRoomLimit(request: RoomLimitRequest, reference: ReferenceData): Outcome<RoomLimitResponse> {
  const found = requireRefrigerant(reference, request.refrigerant);
  if (!found.ok) return found;
  const refusals = refusalsOf(request, found.value);
  if (refusals.length > 0) return refused(...refusals);
  const room = roomOf(request, found.value);
  if (room === null) return done(notCovered(found.value));
  if (request.manualTable == null) return done(judgeByStandard(room));
  return judgeByManual(room, request.manualTable);
}

function refusalsOf(request: RoomLimitRequest, { designation, safetyClass }: Refrigerant): Refusal[] {
  const refusals: Refusal[] = [];
  if (safetyClass.startsWith('B') && safetyClass !== 'B1') {
    const allowed = ['A2L', 'A2', 'A3'];
    const params = { refrigerant: designation, safetyClass };
    refusals.push({ code: 'classNotCovered', path: '/refrigerant', given: designation, allowed, params });
  }
  const heights = [request.releaseHeightM, request.mounting].filter((given) => given != null);
  if (heights.length !== 1) {
    const path = heights.length === 0 ? '' : '/mounting';
    refusals.push({ code: 'exactlyOneOf', path, allowed: ['releaseHeightM', 'mounting'] });
  }
  return refusals;
}

/** Not flammable; the class itself may be from memory. */
function notCovered({ safetyClass, safetyClassStatus }: Refrigerant): RoomLimitResponse {
  return {
    ...NO_FIGURES,
    verdict: 'notCovered',
    clause: `${safetyClass} (ASHRAE 34, ISO 817)`,
    status: statusOf(safetyClassStatus) === 'seen' ? 'confirmed' : 'toBeConfirmed',
  };
}

const statusOf = (written: string | null): FigureStatus => (written?.startsWith('yes') ? 'seen' : 'memory');

/** null: not flammable. */
function roomOf(request: RoomLimitRequest, refrigerant: Refrigerant): Room | null {
  const standard = request.standard ?? DEFAULT_ROOM_STANDARD;
  const figures = findClassFigures(standard, refrigerant.safetyClass);
  const lflKgM3 = request.lflKgM3 ?? refrigerant.lflKgM3;
  const height = findReleaseHeight(request);
  if (figures === null || lflKgM3 === null || height === null) return null;
  const limitG = (volumeM3: number) => asReturned(volumeM3 * lflKgM3 * 1000, 'g');
  return {
    standard,
    figures,
    formula: { lflKgM3, heightM: height.heightM, hasLinearCap: hasLinearCap(standard) },
    chargeG: snap12(request.chargeG),
    areaM2: request.areaM2 == null ? null : snap12(request.areaM2),
    m1G: limitG(figures.m1M3),
    m2G: limitG(figures.m2M3),
    m3G: limitG(figures.m3M3),
    // A limit that the caller names is the caller's.
    lflStatus: request.lflKgM3 != null ? 'seen' : statusOf(refrigerant.lflStatus),
    heightStatus: height.status,
  };
}

function judgeByStandard(room: Room): RoomLimitResponse {
  const verdict = standardVerdict(room);
  const status = verdict.statuses.includes('memory') ? 'toBeConfirmed' : 'confirmed';
  return {
    ...figuresOf(room),
    ...limitOf(room),
    ...minimumAreaOf(room),
    verdict: verdict.is === 'allowed' && status === 'toBeConfirmed' ? 'allowedToBeConfirmed' : verdict.is,
    clause: verdict.clause,
    status,
  };
}

/** The verdict with the status of every figure that it rests on. */
function standardVerdict(room: Room): {
  is: RoomLimitResponse['verdict'];
  clause: string;
  statuses: readonly FigureStatus[];
} {
  const { chargeG, figures, standard, lflStatus } = room;
  const annex = standard === 'EN 378-1' ? standard : `${standard}, Annex GG`;
  const byVolume = (is: RoomLimitResponse['verdict'], name: string, volumeM3: number, status: FigureStatus) => ({
    is,
    clause: `${annex}: ${name} = ${volumeM3} m3 x LFL`,
    statuses: [status, lflStatus],
  });
  if (chargeG <= room.m1G) return byVolume('noCheckNeeded', 'm1', figures.m1M3, figures.m1Status);
  if (chargeG > room.m3G) return byVolume('over', 'm3', figures.m3M3, figures.m2m3Status);
  if (chargeG > room.m2G) return byVolume('measuresRequired', 'm2', figures.m2M3, figures.m2m3Status);
  if (room.areaM2 === null) return byVolume('areaNeeded', 'm1', figures.m1M3, figures.m1Status);
  const { limitG } = limitOf(room);
  const smallest = minimumAreaOf(room);
  // Held against the figures as shown, so that a room of the very area that is named is large enough.
  const fits = chargeG <= (limitG ?? 0) || room.areaM2 >= (smallest.minimumAreaM2 ?? Number.POSITIVE_INFINITY);
  const form =
    smallest.minimumAreaGovernedBy === 'linearCap' ? '0.75 x LFL x h0 x A' : '2.5 x LFL^(5/4) x h0 x A^(1/2)';
  return {
    is: fits ? 'allowed' : 'over',
    clause: `${annex}: ${form}`,
    statuses: [figures.areaStatus, lflStatus, room.heightStatus, formStatus(room)],
  };
}

/**
 * In a small room the square-root form alone allows more than with the cap. That EN 378-1 has none rests on one
 * manual, so there it stays to be confirmed; where both forms agree nothing hangs on it.
 */
function formStatus({ standard, formula, areaM2 }: Room): FigureStatus {
  return standard === 'EN 378-1' && areaM2 !== null && areaM2 < capGovernsBelowM2(formula) ? 'memory' : 'seen';
}

function figuresOf(room: Room) {
  const formulaLimitG =
    room.areaM2 === null ? null : asReturned(largestChargeG(room.formula, room.areaM2).chargeG, 'g');
  return { m1G: room.m1G, m2G: room.m2G, m3G: room.m3G, formulaLimitG };
}

/** min(max(m1, formula), m2); without an area the formula has no say. */
function limitOf(room: Room): Pick<RoomLimitResponse, 'limitG' | 'limitGovernedBy'> {
  const { m1G, m2G, areaM2, formula } = room;
  if (areaM2 === null) return { limitG: m1G, limitGovernedBy: 'm1' };
  const largest = largestChargeG(formula, areaM2);
  const formulaG = asReturned(largest.chargeG, 'g');
  if (formulaG <= m1G) return { limitG: m1G, limitGovernedBy: 'm1' };
  if (formulaG >= m2G) return { limitG: m2G, limitGovernedBy: 'm2' };
  return { limitG: formulaG, limitGovernedBy: largest.form };
}

function minimumAreaOf(room: Room): Pick<RoomLimitResponse, 'minimumAreaM2' | 'minimumAreaGovernedBy'> {
  if (room.chargeG <= room.m1G) return { minimumAreaM2: 0, minimumAreaGovernedBy: null };
  if (room.chargeG > room.m2G) return { minimumAreaM2: null, minimumAreaGovernedBy: null };
  const { areaM2, form } = smallestAreaM2(room.formula, room.chargeG);
  return { minimumAreaM2: asReturned(areaM2, 'm2'), minimumAreaGovernedBy: form };
}

function judgeByManual(room: Room, table: NonNullable<RoomLimitRequest['manualTable']>): Outcome<RoomLimitResponse> {
  const read = readManualTable(table, room.chargeG, room.areaM2, room.m1G);
  if (!read.ok) return read;
  const { row, limitG } = read.value;
  if (row === null) return done(judgeByStandard(room));
  const firstRowG = table[0]?.chargeG ?? 0;
  // Below its first row the manual is silent: m1 is then what any room takes, if it lies below that row.
  const silentLimitG = firstRowG > room.m1G ? room.m1G : null;
  const isEnough = room.areaM2 !== null && room.areaM2 >= row.minimumAreaM2;
  return done({
    ...figuresOf(room),
    limitG: limitG ?? silentLimitG,
    limitGovernedBy: limitG !== null ? 'manualTable' : silentLimitG !== null ? 'm1' : null,
    minimumAreaM2: asReturned(row.minimumAreaM2, 'm2'),
    minimumAreaGovernedBy: 'manualTable',
    verdict: isEnough || row.minimumAreaM2 === 0 ? 'allowed' : room.areaM2 === null ? 'areaNeeded' : 'over',
    clause: `manualTable: ${row.chargeG} g, ${row.minimumAreaM2} m2`,
    status: 'confirmed',
  });
}
