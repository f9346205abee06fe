import type { ChargeResponse } from '../../shared/charge/charge.schema.ts';
import { type LineUnits, type LineWriter, SI_LINES, writtenLines } from '../../shared/charge/written-line.ts';
import type { EntryRow } from '../../shared/entries/entry.schema.ts';
import logEn from '../../shared/messages/log-screen.en.json';
import logEs from '../../shared/messages/log-screen.es.json';
import type { Locale, Preferences } from '../../shared/session/session.schema.ts';
import { fromBase } from '../../shared/units/quantities.ts';
import { roundTo } from '../../shared/units/round.ts';
import { scaleStepIn } from '../../shared/units/scale-step.ts';
import { type MessageValues, messageFor } from '../messages/translate.ts';

/** Words, dates and masses of one paper: in the language and units of who asked for it. */
export interface Words {
  locale: Locale;
  say(key: string, values?: MessageValues): string;
  /** Words of the log: `kind.extraCharge`, `place.factory`. */
  log(key: string): string;
  place(view: EntryRow['from']): string;
  number(value: number, decimals: number): string;
  /** With its unit. */
  mass(massG: number | null): string | null;
  /** Without it, for columns whose head says it. */
  massFigure(massG: number): string;
  massUnit: string;
  /** A step of a scale's display, as the scale was made. */
  scaleStep(stepG: number): string;
  day(day: string): string;
  instant(at: string | Date, timeZone: string): string;
  /** The day of an instant where it happened. */
  instantDay(at: string | Date, timeZone: string): string;
  month(month: string): string;
  /**
   * The arithmetic of a charge as this reader follows it, as rows of what, how and what it gives. A line in other units
   * than m and g has the same in those below it.
   */
  arithmetic(steps: ChargeResponse['steps']): string[][];
}

const NAMED: ReadonlySet<string> = new Set([
  'supplier',
  'cylinder',
  'unit',
  'reclaimer',
  'customer',
  'otherContractor',
]);
/** A column has one unit; pounds and ounces are read in ounces there. */
const SHOWN = {
  g: { unit: 'g', decimals: 0 },
  kg: { unit: 'kg', decimals: 3 },
  oz: { unit: 'oz', decimals: 1 },
  lbOz: { unit: 'oz', decimals: 1 },
} as const;

const MINUS = '\u2212';

export function wordsOf(
  locale: Locale,
  massPreference: Preferences['mass'] | undefined,
  lengthPreference?: Preferences['length'],
): Words {
  const logWords: Readonly<Record<string, string>> = locale.startsWith('es') ? logEs : logEn;
  const shown = SHOWN[massPreference ?? 'g'];
  const number = (value: number, decimals: number) =>
    new Intl.NumberFormat(locale, { minimumFractionDigits: decimals, maximumFractionDigits: decimals })
      .format(value)
      .replace('-', MINUS);
  const massFigure = (massG: number) => {
    const value = fromBase('mass', shown.unit, massG);
    // A difference of 4.4 g against 4.1 g that the scales can tell must not read as 4 and 4.
    const isPartOfGram = shown.unit === 'g' && Math.abs(value - Math.round(value)) >= 0.05;
    const figure = number(value, isPartOfGram ? 1 : shown.decimals);
    return /^\u2212[0.,]+$/.test(figure) ? figure.slice(1) : figure;
  };
  const log = (key: string) => logWords[`log.${key}`] ?? key;
  return {
    locale,
    say: (key, values) => messageFor(`doc.${key}`, locale, values),
    log,
    place({ place, as, label }) {
      if (place === 'atmosphere') return log(`place.atmosphere.${as ?? 'measured'}`);
      if (NAMED.has(place) && label !== '') return log(`placeNamed.${place}`).replace('{{label}}', label);
      return log(`place.${place}`);
    },
    number,
    massFigure,
    mass: (massG) => (massG === null ? null : `${massFigure(massG)} ${shown.unit}`),
    massUnit: shown.unit,
    scaleStep(stepG) {
      const { value, unit } = scaleStepIn(stepG);
      return `${new Intl.NumberFormat(locale, { maximumFractionDigits: 3 }).format(value)} ${unit}`;
    },
    day: (day) =>
      new Intl.DateTimeFormat(locale, { dateStyle: 'medium', timeZone: 'UTC' }).format(new Date(`${day}T12:00:00Z`)),
    instantDay: (at, timeZone) =>
      new Intl.DateTimeFormat(locale, { dateStyle: 'medium', timeZone }).format(new Date(at)),
    instant: (at, timeZone) =>
      new Intl.DateTimeFormat(locale, { dateStyle: 'medium', timeStyle: 'short', timeZone }).format(new Date(at)),
    arithmetic(steps) {
      const mass = massPreference ?? 'g';
      const isInOunces = mass === 'oz' || mass === 'lbOz';
      const own: LineUnits = { length: lengthPreference ?? 'm', mass, rate: isInOunces ? 'oz/ft' : 'g/m' };
      const writer: LineWriter = {
        number: (value, most, least = 0) =>
          new Intl.NumberFormat(locale, { maximumFractionDigits: most, minimumFractionDigits: least })
            .format(roundTo(value, most))
            .replace('-', MINUS),
        say: (key, params) => messageFor(key, locale, params),
      };
      const si = writtenLines(steps, SI_LINES, writer);
      const cells = (line: readonly string[]) => [line.slice(0, -1).join(' = '), line.at(-1) ?? ''];
      return writtenLines(steps, own, writer).flatMap((line, index) => {
        const [label, same] = [steps[index]?.label ?? '', si[index] ?? []];
        const row = [label, ...cells(line)];
        const step = steps[index];
        // A rounding names its grams itself; carbon dioxide and density are in metric units for everybody.
        const isOwn = (step?.unit === 'm' || step?.unit === 'g') && !/^(round|ceil|floor)\(/.test(step.expression);
        return !isOwn || line.join() === same.join() ? [row] : [row, ['', ...cells(same)]];
      });
    },
    month: (month) =>
      new Intl.DateTimeFormat(locale, { year: 'numeric', month: 'long', timeZone: 'UTC' }).format(
        new Date(`${month}-15T12:00:00Z`),
      ),
  };
}
