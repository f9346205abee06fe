import { z } from 'zod';
import table from '../../data/evacuation-levels.json';
import { MASS_FACTORS } from '../units/factors.ts';
import { snap12 } from '../units/round.ts';

export const PRESSURE_CLASSES = ['low', 'medium', 'high', 'veryHigh'] as const;
export type PressureClass = (typeof PRESSURE_CLASSES)[number];
/** Inches of mercury below the atmosphere (deeper is more), or millimetres of mercury above nothing (deeper is less). */
export const LEVEL_UNITS = ['inHgVacuum', 'mmHgAbsolute'] as const;
export const EVACUATION_EXCEPTIONS = ['leaking', 'notMajorRepair', 'smallAppliance'] as const;
export type EvacuationException = (typeof EVACUATION_EXCEPTIONS)[number];

const status = { clause: z.string().min(1), status: z.enum(['yes', 'memory']), source: z.string().min(1) };
export const evacuationTable = z.strictObject({
  version: z.string(),
  /** First day of manufacture or import of the newer recovery machines. */
  machineMadeFrom: z.iso.date(),
  rows: z.array(
    z.strictObject({
      pressureClass: z.enum(PRESSURE_CLASSES),
      fullChargeAtLeastLb: z.number().nullable(),
      fullChargeBelowLb: z.number().nullable(),
      machineBefore1993: z.number(),
      machineSince1993: z.number(),
      unit: z.enum(LEVEL_UNITS),
      ...status,
      note: z.string().nullable(),
    }),
  ),
  exceptions: z.array(z.strictObject({ is: z.enum(EVACUATION_EXCEPTIONS), ...status, note: z.string() })),
  pressureClasses: z.array(
    z.strictObject({
      refrigerant: z.string(),
      pressureClass: z.enum(PRESSURE_CLASSES),
      liquidSaturationKPaAbsAt40C: z.number().nullable(),
      status: z.literal('computed'),
      source: z.string().min(1),
    }),
  ),
});

const { rows, exceptions, pressureClasses, machineMadeFrom } = table as z.output<typeof evacuationTable>;

export interface RequiredLevel {
  value: number;
  unit: (typeof LEVEL_UNITS)[number];
  pressureClass: PressureClass;
  clause: string;
}

/** By the pressure of the saturated liquid at 104 °F (40 CFR 82.152); null for a refrigerant that the table lacks. */
export const findPressureClass = (refrigerant: string): PressureClass | null =>
  pressureClasses.find((row) => row.refrigerant === refrigerant)?.pressureClass ?? null;

/**
 * The level to which a unit is evacuated before it is opened or disposed of (40 CFR 82.156(a), Table 1).
 * @param fullChargeG grams; null: not determined, then the stricter of what may apply
 * @param machineMadeOn day on which the recovery machine was made or imported; null: not known, then the stricter column
 */
export function requiredLevel(
  refrigerant: string,
  fullChargeG: number | null,
  machineMadeOn: string | null,
): RequiredLevel | null {
  const pressureClass = findPressureClass(refrigerant);
  if (!pressureClass) return null;
  const lb = fullChargeG === null ? null : snap12(fullChargeG / MASS_FACTORS.lb.perUnit.valueOf());
  const fitting = rows.filter(
    (row) =>
      row.pressureClass === pressureClass &&
      (lb === null ||
        (lb >= (row.fullChargeAtLeastLb ?? 0) && (row.fullChargeBelowLb === null || lb < row.fullChargeBelowLb))),
  );
  const isOlder = machineMadeOn !== null && machineMadeOn < machineMadeFrom;
  const levels = fitting.map((row) => ({
    value: isOlder ? row.machineBefore1993 : row.machineSince1993,
    unit: row.unit,
    pressureClass,
    clause: row.clause,
  }));
  return levels.toSorted((a, b) => b.value - a.value)[0] ?? null;
}

/** Deep enough: at least the vacuum, or at most the absolute pressure, that is required. */
export const reachesLevel = (required: Pick<RequiredLevel, 'value' | 'unit'>, reached: number): boolean =>
  required.unit === 'inHgVacuum' ? reached >= required.value : reached <= required.value;

/** The clause under which another level applies. */
export const clauseOfException = (is: EvacuationException): string =>
  exceptions.find((exception) => exception.is === is)?.clause ?? '';
