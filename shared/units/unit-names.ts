import type { QuantityKind, UnitOf } from './quantities.ts';

type Names<Kind extends QuantityKind> = { readonly [Unit in UnitOf<Kind>]: readonly string[] };

const kg = ['kg', 'kgs', 'kilo', 'kilos', 'kilogram', 'kilograms', 'kilogramo', 'kilogramos'];
const gauge = {
  kPa: ['kPa', 'kPag', 'kPa g'],
  bar: ['bar', 'barg', 'bar g', 'bars', 'bares'],
  psi: ['psi', 'psig', 'psi g', 'lb/in2'],
  MPa: ['MPa', 'MPag'],
  'kgf/cm2': ['kgf/cm2', 'kgf/cm²', 'kg/cm2', 'kg/cm²'],
};
const feet = ['ft', "'", 'foot', 'feet', 'pie', 'pies'];
const inches = ['in', '"', 'inch', 'inches', 'pulg', 'pulgada', 'pulgadas'];

/**
 * How people write a unit, in English and Spanish; upper and lower case alike. `ton` is missing on purpose: it may be
 * 907 or 1,000 kg, or a cooling capacity.
 */
export const UNIT_NAMES: { readonly [Kind in QuantityKind]: Names<Kind> } = {
  mass: {
    g: ['g', 'gr', 'gram', 'grams', 'gramo', 'gramos'],
    kg,
    lb: ['lb', 'lbs', 'pound', 'pounds', 'libra', 'libras'],
    oz: ['oz', 'ozs', 'ounce', 'ounces', 'onza', 'onzas'],
    t: ['t', 'tonne', 'tonnes'],
  },
  length: {
    m: ['m', 'meter', 'meters', 'metre', 'metres', 'metro', 'metros'],
    cm: ['cm'],
    mm: ['mm'],
    ft: feet,
    in: inches,
  },
  pipeDiameter: { mm: ['mm'], in: inches },
  pressureGauge: gauge,
  pressureAbs: {
    kPa: ['kPa', 'kPaa', 'kPa a', 'kPa abs'],
    bar: ['bar', 'bara', 'bar a', 'bar abs', 'bars', 'bares'],
    psi: ['psi', 'psia', 'psi a'],
    MPa: ['MPa', 'MPaa', 'MPa abs'],
    'kgf/cm2': gauge['kgf/cm2'],
  },
  vacuum: {
    micron: ['micron', 'microns', 'µm', 'μm', 'um', 'µmHg', 'μmHg', 'mTorr', 'micra', 'micras', 'micrón', 'micrones'],
    Pa: ['Pa'],
    mbar: ['mbar', 'hPa'],
    kPa: ['kPa'],
    Torr: ['Torr', 'mmHg'],
  },
  massPerLength: { 'g/m': ['g/m'], 'kg/m': ['kg/m'], 'oz/ft': ['oz/ft'], 'g/ft': ['g/ft'] },
  area: {
    m2: ['m2', 'm²', 'sqm', 'sq m'],
    ft2: ['ft2', 'ft²', 'sqft', 'sq ft', 'sq. ft.', 'pie2', 'pie²', 'pies2', 'pies²'],
  },
  volume: {
    L: ['L', 'liter', 'liters', 'litre', 'litres', 'litro', 'litros', 'dm3', 'dm³'],
    m3: ['m3', 'm³'],
    ft3: ['ft3', 'ft³', 'cuft', 'cu ft', 'cu. ft.', 'pie3', 'pie³', 'pies3', 'pies³'],
  },
  torque: {
    'N.m': ['Nm', 'N m', 'N.m', 'N·m'],
    'ft.lbf': ['ft-lbf', 'ft-lb', 'ft lb', 'ft lbf', 'ftlb', 'lbf·ft', 'ft·lbf'],
  },
  temperature: {
    '°C': ['°C', 'C', 'º C', 'ºC', '° C', 'deg C'],
    '°F': ['°F', 'F', 'º F', 'ºF', '° F', 'deg F'],
  },
  temperatureDifference: { K: ['K'], '°C': ['°C', 'C', 'ºC'], '°F': ['°F', 'F', 'ºF'] },
};

/** What stands before the second part of `12 ft 6 in` and `11 lb 4.5 oz`, and how many make one of the first. */
export const COMPOUND_UNITS = {
  length: { first: 'ft', second: 'in', ratio: 12 },
  mass: { first: 'lb', second: 'oz', ratio: 16 },
} as const;
