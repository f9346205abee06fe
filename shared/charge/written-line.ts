import type { MessageParams } from '../calculations/say-messages.ts';
import { LENGTH_FACTORS, MASS_FACTORS, MASS_PER_LENGTH_FACTORS, type MassPerLengthUnit } from '../units/factors.ts';
import { roundTo } from '../units/round.ts';
import type { ChargeResponse } from './charge.schema.ts';
import { type Figure, readWorking, type Sign, writeWorking } from './working-text.ts';

/** The units that a person reads the arithmetic of a charge in. */
export interface LineUnits {
  length: 'm' | 'ft';
  mass: 'g' | 'kg' | 'oz' | 'lbOz';
  /** As the manual's rate was typed; a line that multiplies by it is worked in its units. */
  rate: MassPerLengthUnit;
}

export interface LineWriter {
  /** A figure in the reader's locale, at most and at least so many decimals. */
  number: (value: number, most: number, least?: number) => string;
  /** A sentence of the catalogue. */
  say: (key: string, params: MessageParams) => string;
}

type Step = Pick<ChargeResponse['steps'][number], 'expression' | 'value' | 'unit'>;
type ShownUnit = 'm' | 'ft' | 'g' | 'kg' | 'oz' | 't' | 'mm²' | 'kg/m³' | MassPerLengthUnit | '';

export const SI_LINES: LineUnits = { length: 'm', mass: 'g', rate: 'g/m' };

const NBSP = '\u00a0';
/** Decimals of a result; the figures that lead to it get as many more as the pencil needs to arrive there. */
const DECIMALS: Record<ShownUnit, number> = {
  m: 2,
  ft: 2,
  g: 2,
  kg: 3,
  oz: 2,
  t: 3,
  'g/m': 2,
  'kg/m': 5,
  'oz/ft': 3,
  'g/ft': 2,
  'mm²': 2,
  'kg/m³': 1,
  '': 6,
};
const MOST_DECIMALS = 6;
/** A tenth of an ounce that was kept as 2.835 g is one of 0.1 oz. */
const NEARLY = 1e-4;
/** Half of the last decimal that a step's value keeps. */
const CUT = 0.00050001;

/** g, m or g/m in one of the unit; a step in tonnes is shown in tonnes. */
const per = (unit: ShownUnit): number => {
  if (unit === 't') return 1;
  if (unit in MASS_FACTORS) return MASS_FACTORS[unit as 'g'].perUnit.valueOf();
  if (unit in LENGTH_FACTORS) return LENGTH_FACTORS[unit as 'm'].perUnit.valueOf();
  if (unit in MASS_PER_LENGTH_FACTORS) return MASS_PER_LENGTH_FACTORS[unit as 'g/m'].perUnit.valueOf();
  return 1;
};

const hasOwnMass = ({ mass }: LineUnits) => mass === 'oz' || mass === 'lbOz';

/**
 * The steps of a charge as a reader follows them with a pencil: each line a chain of parts that equal one another, the
 * last the result. The steps themselves are in m, g and g/m (the contract of the API) and stay as they are; here their
 * figures are turned into the reader's units, with as few decimals as still lead to the result as it stands.
 */
export function writtenLines(steps: readonly Step[], units: LineUnits, writer: LineWriter): string[][] {
  // A manual's formula counts in metres and grams: what goes into it is then shown in metres too.
  const hasFormula = steps.some((step) => step.unit === 'g' && isFormula(step));
  return steps.map((step) => withoutRepeats(lineOf(step, units, writer, hasFormula)));
}

function isFormula({ expression }: Step): boolean {
  if (/^(round|ceil|floor)\(-?[\d.]+ g \/|<=/.test(expression)) return false;
  const parts = readWorking(expression);
  return parts === null || !parts.some((part) => typeof part === 'object' && part.unit.startsWith('g'));
}

function lineOf(step: Step, units: LineUnits, writer: LineWriter, hasFormula: boolean): string[] {
  const { expression, value, unit } = step;
  const show = (base: number, as: ShownUnit, most = DECIMALS[as]) => shown(base / per(as), as, most, writer);
  const ownMass = (massG: number) => massesOf(massG, units, writer);
  const rounding = /^(round|ceil|floor)\((-?[\d.]+) g \/ ([\d.]+) g\) x/.exec(expression);
  if (rounding) return roundingLine(rounding, value, units, writer);
  const bracket = /^(-?[\d.]+) m <= ([\d.]+) m: /.exec(expression);
  if (bracket) {
    const length = show(Number(bracket[1]), units.length, 4);
    return [
      writer.say('line.bracket', { length, limit: show(Number(bracket[2]), units.length, 4) }),
      ...ownMass(value),
    ];
  }
  const read = readWorking(expression);
  if (unit === 'g' && isFormula(step)) return [local(expression, writer), show(value, 'g'), ...ownMass(value)];
  if (!read) return [local(expression, writer), shown(value, unit as ShownUnit, DECIMALS[unit], writer)];

  if (unit === 'm') {
    const line = work(read, (figure) => asLength(figure, units.length), value, units.length, writer);
    return hasFormula && units.length !== 'm' ? [...line, show(value, 'm', 3)] : line;
  }
  if (unit === 'g' && read.some((part) => typeof part === 'object' && part.unit === 'g/m')) {
    const [mass, length] = units.rate.split('/') as ['g' | 'kg' | 'oz', 'm' | 'ft'];
    const convert = (figure: Figure): Figure => {
      if (figure.unit === 'g/m') return { value: figure.value / per(units.rate), unit: units.rate };
      const own = length === units.length || figure.value === 0 ? '' : show(figure.value, units.length);
      return { ...asLength(figure, length), ...(own ? { aside: own } : {}) };
    };
    return [...work(read, convert, value, mass, writer), ...ownMass(value)];
  }
  if (unit === 'g') {
    const as = hasOwnMass(units) ? 'oz' : 'g';
    const convert = (figure: Figure): Figure =>
      figure.unit === 'g' ? { value: figure.value / per(as), unit: as } : figure;
    return [...work(read, convert, value, as, writer), ...ownMass(value)];
  }
  if (unit === 't' && hasOwnMass(units)) {
    const convert = (figure: Figure): Figure =>
      figure.unit === 'kg' ? { ...figure, aside: show(figure.value * 1000, 'oz') } : figure;
    return work(read, convert, value, 't', writer);
  }
  const line = work(read, (figure) => figure, value, unit as ShownUnit, writer);
  return unit === 'g/m' && units.rate !== 'g/m' ? [...line, show(value, units.rate)] : line;
}

const asLength = (figure: Figure, as: 'm' | 'ft'): Figure =>
  figure.unit === 'm' ? { value: figure.value / per(as), unit: as } : figure;

/** The working and its result: the fewest decimals with which the figures as they stand give the result as it stands. */
function work(
  parts: readonly (Figure | Sign)[],
  convert: (figure: Figure) => Figure,
  value: number,
  as: ShownUnit,
  writer: LineWriter,
): string[] {
  const converted = parts.map((part) => (typeof part === 'object' ? convert(part) : part));
  const write = (decimals: number) =>
    writeWorking(converted, {
      round: (figure) =>
        decimals > MOST_DECIMALS ? figure.value : roundTo(figure.value, Math.max(decimals, leastDecimals(figure.unit))),
      show: (figure) =>
        shown(figure.value, figure.unit as ShownUnit, Math.max(decimals, leastDecimals(figure.unit)), writer) +
        (figure.aside ? ` (${figure.aside})` : ''),
      notBelowZero: (working) => writer.say('line.notBelowZero', { working }),
    });
  // The step's own value is cut to its three decimals, which can tip the last digit in another unit.
  const whole = write(MOST_DECIMALS + 1).value;
  const result = Math.abs(whole * per(as) - value) <= CUT ? whole : value / per(as);
  for (let most = DECIMALS[as]; most <= MOST_DECIMALS; most++) {
    for (let decimals = Math.min(DECIMALS[as], 2); decimals <= MOST_DECIMALS; decimals++) {
      const line = write(decimals);
      if (roundTo(line.value, most) === roundTo(result, most)) return [line.text, shown(result, as, most, writer)];
    }
  }
  return [write(MOST_DECIMALS).text, shown(result, as, DECIMALS[as], writer)];
}

const leastDecimals = (unit: string) => (unit === 'oz/ft' ? 3 : 0);

function roundingLine(match: RegExpExecArray, value: number, units: LineUnits, writer: LineWriter): string[] {
  const [, name, massText, stepText] = match;
  const massG = Number(massText);
  const stepG = Number(stepText);
  const key = `line.round.${name === 'ceil' ? 'up' : name === 'floor' ? 'down' : 'nearest'}`;
  const inOunces = stepG / per('oz');
  const isOunceStep = hasOwnMass(units) && Math.abs(roundTo(inOunces, 2) - inOunces) < NEARLY;
  const as = isOunceStep ? 'oz' : 'g';
  const step = shown(stepG / per(as), as, 3, writer);
  const figure = massG / per(as);
  // A figure cut so far that it would round elsewhere is no line that one can check.
  let decimals = DECIMALS[as];
  const differs = (at: number) => Math.abs(roundTo(figure, at) - figure) > 1e-9;
  const onEdge = (at: number) => {
    const steps = (roundTo(figure, at) / stepG) * per(as);
    const edge = name === 'round' ? Math.abs(steps - Math.floor(steps) - 0.5) : Math.abs(steps - Math.round(steps));
    return edge < 1e-9;
  };
  while (decimals < MOST_DECIMALS && differs(decimals) && onEdge(decimals)) decimals++;
  const line = [
    writer.say(key, { mass: shown(figure, as, decimals, writer), step }),
    shown(value / per(as), as, 3, writer),
    ...massesOf(value, units, writer),
  ];
  return isOunceStep || !hasOwnMass(units) ? line : [shown(massG / per('oz'), 'oz', DECIMALS.oz, writer), ...line];
}

/** The mass in the reader's ounces, and in pounds and ounces from a pound on; nothing for who reads grams. */
function massesOf(massG: number, units: LineUnits, writer: LineWriter): string[] {
  if (!hasOwnMass(units)) return [shown(massG, 'g', DECIMALS.g, writer)];
  const ounces = massG / per('oz');
  const inOunces = shown(ounces, 'oz', DECIMALS.oz, writer);
  if (units.mass === 'oz' || Math.abs(ounces) < 16) return [inOunces];
  const rounded = roundTo(Math.abs(ounces), DECIMALS.oz);
  const pounds = Math.floor(rounded / 16);
  const sign = ounces < 0 ? '\u2212' : '';
  const rest = writer.number(rounded - pounds * 16, DECIMALS.oz);
  return [inOunces, `${sign}${writer.number(pounds, 0)}${NBSP}lb ${rest}${NBSP}oz`];
}

function shown(value: number, unit: ShownUnit, most: number, writer: LineWriter): string {
  // A length in metres always shows a decimal, so that it reads as measured.
  const figure = writer.number(value, most, unit === 'm' ? 1 : 0);
  return unit === '' ? figure : `${figure}${NBSP}${unit}`;
}

/** A formula is shown as it was written, with the signs of print. */
const local = (expression: string, { number }: LineWriter) =>
  expression.replace(/(\d)\.(\d)/g, `$1${number(1.5, 1).charAt(1)}$2`).replace(/ - /g, ' \u2212 ');

const withoutRepeats = (line: readonly string[]) => line.filter((part, index) => part !== line[index - 1]);
