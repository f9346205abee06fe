import Fraction from 'fraction.js';
import {
  AREA_FACTORS,
  LENGTH_FACTORS,
  MASS_FACTORS,
  MASS_PER_LENGTH_FACTORS,
  PRESSURE_FACTORS,
  TEMPERATURE_DIFFERENCE_FACTORS,
  TORQUE_FACTORS,
  VOLUME_FACTORS,
} from './factors.ts';

const scaled = <Unit extends string>(
  factors: Readonly<Record<Unit, { perUnit: Fraction }>>,
  base: Fraction,
  units: readonly Unit[],
) => Object.fromEntries(units.map((unit) => [unit, factors[unit].perUnit.div(base)])) as Record<Unit, Fraction>;

const one = new Fraction(1);
const pressureUnits = ['kPa', 'bar', 'psi', 'MPa', 'kgf/cm2'] as const;

/**
 * What a person can enter, with the base unit that the program works in and the factor of each unit to it. Gauge and
 * absolute pressure are kinds of their own: no conversion leads from one to the other without the local atmosphere.
 */
export const QUANTITIES = {
  mass: { base: 'g', perUnit: scaled(MASS_FACTORS, one, ['g', 'kg', 'lb', 'oz', 't']) },
  length: { base: 'm', perUnit: scaled(LENGTH_FACTORS, one, ['m', 'cm', 'mm', 'ft', 'in']) },
  pipeDiameter: { base: 'mm', perUnit: scaled(LENGTH_FACTORS, LENGTH_FACTORS.mm.perUnit, ['mm', 'in']) },
  pressureGauge: { base: 'kPa', perUnit: scaled(PRESSURE_FACTORS, one, pressureUnits) },
  pressureAbs: { base: 'kPa', perUnit: scaled(PRESSURE_FACTORS, one, pressureUnits) },
  vacuum: {
    base: 'Pa',
    perUnit: scaled(PRESSURE_FACTORS, PRESSURE_FACTORS.Pa.perUnit, ['micron', 'Pa', 'mbar', 'kPa', 'Torr']),
  },
  massPerLength: { base: 'g/m', perUnit: scaled(MASS_PER_LENGTH_FACTORS, one, ['g/m', 'kg/m', 'oz/ft', 'g/ft']) },
  area: { base: 'm2', perUnit: scaled(AREA_FACTORS, one, ['m2', 'ft2']) },
  volume: { base: 'L', perUnit: scaled(VOLUME_FACTORS, one, ['L', 'm3', 'ft3']) },
  torque: { base: 'N.m', perUnit: scaled(TORQUE_FACTORS, one, ['N.m', 'ft.lbf']) },
  /** °C and °F differ by an offset too: see `toBaseExact`. */
  temperature: { base: '°C', perUnit: { '°C': one, '°F': TEMPERATURE_DIFFERENCE_FACTORS['°F'].perUnit } },
  temperatureDifference: { base: 'K', perUnit: { K: one, '°C': one, '°F': new Fraction(5, 9) } },
} as const;

export type QuantityKind = keyof typeof QUANTITIES;
export type UnitOf<Kind extends QuantityKind> = Extract<keyof (typeof QUANTITIES)[Kind]['perUnit'], string>;
export type AnyUnit = { [Kind in QuantityKind]: UnitOf<Kind> }[QuantityKind];

export const unitsOf = <Kind extends QuantityKind>(kind: Kind) =>
  Object.keys(QUANTITIES[kind].perUnit) as UnitOf<Kind>[];

function factorOf(kind: QuantityKind, unit: string): Fraction {
  const factor = (QUANTITIES[kind].perUnit as Record<string, Fraction>)[unit];
  if (!factor) throw new RangeError(`${unit} is no unit of ${kind}`);
  return factor;
}

const isFahrenheitReading = (kind: QuantityKind, unit: string) => kind === 'temperature' && unit === '°F';

/** A value in one of the kind's units as an exact value in its base unit. */
export function toBaseExact<Kind extends QuantityKind>(kind: Kind, unit: UnitOf<Kind>, value: Fraction): Fraction {
  const shifted = isFahrenheitReading(kind, unit) ? value.sub(32) : value;
  return shifted.mul(factorOf(kind, unit));
}

/** As `toBaseExact`, in doubles. */
export function toBase<Kind extends QuantityKind>(kind: Kind, unit: UnitOf<Kind>, value: number): number {
  const shifted = isFahrenheitReading(kind, unit) ? value - 32 : value;
  return shifted * factorOf(kind, unit).valueOf();
}

/** A value in the kind's base unit in another of its units. */
export function fromBase<Kind extends QuantityKind>(kind: Kind, unit: UnitOf<Kind>, base: number): number {
  const value = base / factorOf(kind, unit).valueOf();
  return isFahrenheitReading(kind, unit) ? value + 32 : value;
}
