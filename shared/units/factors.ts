import Fraction from 'fraction.js';

/**
 * The one table of unit factors. Every factor is a fraction, so that a conversion can be carried out without rounding;
 * `exact: false` marks factors that are themselves a convention or a measured figure.
 * No other file holds a conversion factor.
 */
export interface UnitFactor {
  /** How many of the base unit make one of this unit. */
  perUnit: Fraction;
  exact: boolean;
  source: string;
}

const exactly = (value: string | number, source: string): UnitFactor => ({
  perUnit: new Fraction(value),
  exact: true,
  source,
});
const by = (perUnit: Fraction, source: string): UnitFactor => ({ perUnit, exact: true, source });

const YARD_AND_POUND = 'international yard and pound agreement, 1959';
const SI = 'SI prefix';
const BAR = 'bar: 100,000 Pa by definition';
const ATMOSPHERE = 'standard atmosphere: 101,325 Pa (CGPM 1954)';

const pound = new Fraction('453.59237');
const foot = new Fraction('0.3048');
const inch = new Fraction('0.0254');
/** N: the pound-force is the pound under standard gravity, 9.80665 m/s2 (CGPM 1901). */
const poundForceN = new Fraction('4.4482216152605');
const atmospherePa = new Fraction(101325);

/** Mass; base: gram. */
export const MASS_FACTORS = {
  g: exactly(1, SI),
  kg: exactly(1000, SI),
  t: exactly(1_000_000, 'tonne: 1,000 kg'),
  lb: by(pound, `${YARD_AND_POUND}: 0.45359237 kg`),
  oz: by(pound.div(16), `avoirdupois ounce: 1/16 lb; ${YARD_AND_POUND}`),
} as const;
export type MassUnit = keyof typeof MASS_FACTORS;

/** Length; base: metre. */
export const LENGTH_FACTORS = {
  m: exactly(1, SI),
  cm: exactly('0.01', SI),
  mm: exactly('0.001', SI),
  ft: by(foot, `${YARD_AND_POUND}: 0.3048 m`),
  in: by(inch, '1/12 ft: 25.4 mm'),
} as const;
export type LengthUnit = keyof typeof LENGTH_FACTORS;

/** Area; base: square metre. */
export const AREA_FACTORS = {
  m2: exactly(1, SI),
  ft2: by(foot.mul(foot), 'square of 0.3048 m'),
} as const;
export type AreaUnit = keyof typeof AREA_FACTORS;

/** Volume; base: litre. */
export const VOLUME_FACTORS = {
  L: exactly(1, 'litre: 1 dm3'),
  m3: exactly(1000, SI),
  ft3: by(foot.pow(3).mul(1000), 'cube of 0.3048 m'),
} as const;
export type VolumeUnit = keyof typeof VOLUME_FACTORS;

/**
 * Pressure; base: kilopascal. The factors hold for differences and for absolute pressures; between gauge and absolute
 * lies the atmosphere of the place, which no factor can supply.
 */
export const PRESSURE_FACTORS = {
  kPa: exactly(1, SI),
  Pa: exactly('0.001', SI),
  MPa: exactly(1000, SI),
  bar: exactly(100, BAR),
  mbar: exactly('0.1', BAR),
  psi: by(poundForceN.div(inch.mul(inch)).div(1000), 'pound-force per square inch: 4.4482216152605 N / (25.4 mm)2'),
  atm: by(atmospherePa.div(1000), ATMOSPHERE),
  'kgf/cm2': exactly('98.0665', 'standard gravity 9.80665 m/s2'),
  Torr: by(atmospherePa.div(760).div(1000), `1/760 of the ${ATMOSPHERE}`),
  micron: by(atmospherePa.div(760_000).div(1000), `1/1,000 Torr; Torr: 1/760 of the ${ATMOSPHERE}`),
  inHg: {
    perUnit: new Fraction('13595.1').mul(new Fraction('9.80665')).mul(inch).div(1000),
    exact: false,
    source: 'conventional: mercury of 13,595.1 kg/m3 at standard gravity',
  },
} as const satisfies Record<string, UnitFactor>;
export type PressureUnit = keyof typeof PRESSURE_FACTORS;

/** Mass per length (the rate of a charge basis); base: gram per metre. */
export const MASS_PER_LENGTH_FACTORS = {
  'g/m': exactly(1, SI),
  'kg/m': exactly(1000, SI),
  'oz/ft': by(pound.div(16).div(foot), '1/16 lb over 0.3048 m: 93.0102464731 g/m'),
  'g/ft': by(new Fraction(1).div(foot), '1 g over 0.3048 m'),
} as const;
export type MassPerLengthUnit = keyof typeof MASS_PER_LENGTH_FACTORS;

/** Mass per volume; base: kilogram per cubic metre. */
export const MASS_PER_VOLUME_FACTORS = {
  'kg/m3': exactly(1, SI),
  'g/m3': exactly('0.001', SI),
  'lb/ft3': by(pound.div(1000).div(foot.pow(3)), '0.45359237 kg over (0.3048 m)3'),
  'lb/1000ft3': by(pound.div(1000).div(foot.pow(3)).div(1000), '0.45359237 kg over 1,000 x (0.3048 m)3'),
} as const;
export type MassPerVolumeUnit = keyof typeof MASS_PER_VOLUME_FACTORS;

/** Torque; base: newton metre. */
export const TORQUE_FACTORS = {
  'N.m': exactly(1, SI),
  'ft.lbf': by(poundForceN.mul(foot), 'pound-force at standard gravity over 0.3048 m: 1.3558179483314004 N m'),
} as const;
export type TorqueUnit = keyof typeof TORQUE_FACTORS;

/** Power (cooling capacity); base: watt. */
export const POWER_FACTORS = {
  W: exactly(1, SI),
  kW: exactly(1000, SI),
  'Btu/h': by(new Fraction('1055.05585262').div(3600), 'Btu (IT): 1055.05585262 J'),
  ton: by(
    new Fraction('1055.05585262').div(3600).mul(12000),
    'ton of refrigeration: 12,000 Btu (IT)/h: 3516.8528420667 W',
  ),
} as const;
export type PowerUnit = keyof typeof POWER_FACTORS;

/** Air flow; base: cubic metre per hour. */
export const AIR_FLOW_FACTORS = {
  'm3/h': exactly(1, SI),
  cfm: by(foot.pow(3).mul(60), 'cubic foot per minute: 60 x (0.3048 m)3 per hour'),
} as const;

/** Temperature differences; base: kelvin. A difference converts by 5/9 alone, without the 32 degrees. */
export const TEMPERATURE_DIFFERENCE_FACTORS = {
  K: exactly(1, SI),
  '°F': by(new Fraction(5, 9), 'Fahrenheit scale: 1.8 degrees to the kelvin'),
} as const;
export type TemperatureDifferenceUnit = keyof typeof TEMPERATURE_DIFFERENCE_FACTORS;

/** kPa absolute: the standard atmosphere, the default wherever the pressure of the place is not known. */
export const STANDARD_ATMOSPHERE_KPA = 101.325;
/** K at 0 °C, exact by definition. */
export const ZERO_CELSIUS_K = 273.15;
