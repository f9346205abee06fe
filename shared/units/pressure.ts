import { STANDARD_ATMOSPHERE_KPA } from './factors.ts';

/** kPa above the atmosphere of the place, as gauges read. */
export type KPaGauge = number & { readonly pressure: 'gauge' };
/** kPa above vacuum, as the gas laws and the saturation tables want it. */
export type KPaAbs = number & { readonly pressure: 'absolute' };

export const kPaGauge = (value: number): KPaGauge => value as KPaGauge;
export const kPaAbs = (value: number): KPaAbs => value as KPaAbs;

export const STANDARD_ATMOSPHERE = kPaAbs(STANDARD_ATMOSPHERE_KPA);

export const absoluteOf = (gauge: KPaGauge, atmosphere: KPaAbs): KPaAbs => kPaAbs(gauge + atmosphere);
export const gaugeOf = (absolute: KPaAbs, atmosphere: KPaAbs): KPaGauge => kPaGauge(absolute - atmosphere);

/** Metres between which the atmosphere's formula is used: the lowest and the highest place that people work in. */
export const ALTITUDE_RANGE_M = { min: -500, max: 6000 } as const;

/** Pressure of the ICAO standard atmosphere at a height in metres (troposphere formula, valid to 11 km). */
export function atmosphereAtAltitude(altitudeM: number): KPaAbs {
  return kPaAbs(STANDARD_ATMOSPHERE_KPA * (1 - 2.25577e-5 * altitudeM) ** 5.25588);
}
