import { done, type Outcome, refused } from '../problems/outcome.ts';
import type { TypedMass } from '../units/mass.ts';
import { parseQuantity } from '../units/parse-quantity.ts';
import type { StoredMassUnit } from '../units/stored-mass.ts';
import type { CheckImportRequest } from './import.schema.ts';
import { wordOfCell } from './import-fields.ts';

export type CellOptions = Pick<CheckImportRequest, 'massUnit' | 'decimal' | 'dateOrder'>;

/** `11.34 kg`, `11,34`, `25 lb 4 oz`. The separator of decimals is what the person said the file uses. */
export function readMass(text: string, { massUnit, decimal }: CellOptions, path: string): Outcome<TypedMass> {
  const separator = decimal === 'comma' ? ',' : '.';
  // 1,250 may be either: by the file's own habit it is decimal exactly where its separator is the file's.
  const separatorMeans = text.includes(separator) ? 'decimal' : 'grouping';
  const outcome = parseQuantity('mass', text, {
    defaultUnit: massUnit as StoredMassUnit,
    decimalSeparator: separator,
    separatorMeans,
    path,
  });
  if (!outcome.ok) return outcome;
  const { value, unit } = outcome.value.typed;
  if (!/[1-9]/.test(value)) return refused({ code: 'massNotPositive', path, given: text });
  return done({ value, unit: unit as TypedMass['unit'] });
}

const ISO = /^(\d{4})-(\d{1,2})-(\d{1,2})(?:[T ](\d{1,2}):(\d{2})(?::\d{2}(?:\.\d+)?)?)?$/;
const LOCAL = /^(\d{1,2})[./-](\d{1,2})[./-](\d{4})(?:,?\s+(\d{1,2}):(\d{2})(?::\d{2})?)?$/;

/** Day and minute as the table says them, without a zone: `2026-11-30` and `16:12`, or null where no time stands. */
export function readWhen(
  text: string,
  { dateOrder }: CellOptions,
  path: string,
): Outcome<{ day: string; time: string | null }> {
  // What a spreadsheet counts days by: from 1900 or from 1904, which the number does not say.
  const code = /^\d{5}(?:[.,]\d+)?$/.test(text) ? 'importDateSerial' : 'importDate';
  const wrong = refused({ code, path, given: text, params: { given: text } });
  const iso = ISO.exec(text);
  const local = iso ? null : LOCAL.exec(text);
  const found = iso ?? local;
  if (!found) return wrong;
  const [, first = '', second = '', third = '', hour, minute] = found;
  const [year, month, date] = iso
    ? [first, second, third]
    : dateOrder === 'dmy'
      ? [third, second, first]
      : [third, first, second];
  const day = `${year}-${month.padStart(2, '0')}-${date.padStart(2, '0')}`;
  const known = new Date(`${day}T00:00:00Z`);
  if (Number.isNaN(known.getTime()) || known.toISOString().slice(0, 10) !== day) return wrong;
  if (hour === undefined) return done({ day, time: null });
  if (Number(hour) > 23 || Number(minute) > 59) return wrong;
  return done({ day, time: `${hour.padStart(2, '0')}:${minute}` });
}

/** One of a closed list, by its words in either language. */
export function readWord(list: string, text: string, path: string): Outcome<string> {
  const word = wordOfCell(list, text);
  return word === null ? refused({ code: 'importWord', path, given: text, params: { given: text } }) : done(word);
}
