import { describe, expect, it } from 'vitest';
import { guessColumns, IMPORT_FIELDS, wordOfCell } from './import-fields.ts';
import { readMass, readWhen, readWord } from './read-cells.ts';

const options = { massUnit: 'kg', decimal: 'point', dateOrder: 'dmy' } as const;
const mass = (text: string, more = {}) => {
  const read = readMass(text, { ...options, ...more }, '/mass');
  return read.ok ? `${read.value.value} ${read.value.unit}` : read.refusals[0]?.code;
};
const when = (text: string, dateOrder: 'dmy' | 'mdy' = 'dmy') => {
  const read = readWhen(text, { ...options, dateOrder }, '/at');
  return read.ok ? `${read.value.day} ${read.value.time ?? ''}`.trim() : read.refusals[0]?.code;
};

describe('The heads of a table', () => {
  it('name their columns in English and in Spanish, with accents, capitals and a unit behind them', () => {
    expect(guessColumns('cylinders', ['Tag', 'Type', 'Gas', 'Tare (kg)', 'Held by'])).toEqual({
      tag: 0,
      kind: 1,
      refrigerant: 2,
      tare: 3,
      heldBy: 4,
    });
    expect(guessColumns('units', ['Unidad', 'Ubicación', 'REFRIGERANTE', 'Carga total', 'Nº raro'])).toEqual({
      tag: 0,
      site: 1,
      refrigerant: 2,
      fullCharge: 3,
    });
  });

  it('give one column to one field', () => {
    const found = Object.values(guessColumns('entries', ['date', 'kind', 'mass', 'cylinder', 'cylinder', 'type']));
    expect(new Set(found).size).toBe(found.length);
  });

  it('name every field by its own name', () => {
    for (const [kind, fields] of Object.entries(IMPORT_FIELDS)) {
      const names = fields.map(({ name }) => name);
      expect(Object.keys(guessColumns(kind as 'units', names)).sort()).toEqual([...names].sort());
    }
  });
});

describe('A mass in a cell', () => {
  it('is read with its own unit, else with the unit of the file', () => {
    expect(mass('11.34')).toBe('11.34 kg');
    expect(mass('90 g')).toBe('90 g');
    expect(mass('11 lb 4.5 oz')).toBe('180.5 oz');
  });

  it('is read by the decimal separator that the file is said to use', () => {
    expect(mass('1,250', { decimal: 'comma' })).toBe('1.250 kg');
    expect(mass('1,250', { decimal: 'point' })).toBe('1250 kg');
    expect(mass('1.250', { decimal: 'comma' })).toBe('1250 kg');
    expect(mass('1.250,5', { decimal: 'comma' })).toBe('1250.5 kg');
  });

  it('is refused where it is none, below zero, or nothing', () => {
    expect(mass('full')).toBe('notANumber');
    expect(mass('-3')).toBe('negative');
    expect(mass('0')).toBe('massNotPositive');
    expect(mass('=1+1')).toBe('notANumber');
  });
});

describe('A date in a cell', () => {
  it('is read by the order that the file is said to use, or as it stands in ISO 8601', () => {
    expect(when('03/04/2025')).toBe('2025-04-03');
    expect(when('03/04/2025', 'mdy')).toBe('2025-03-04');
    expect(when('2025-04-03')).toBe('2025-04-03');
    expect(when('3.4.2025 7:05')).toBe('2025-04-03 07:05');
    expect(when('2025-04-03T16:12')).toBe('2025-04-03 16:12');
  });

  it('is refused where the calendar has no such day', () => {
    for (const text of ['31/02/2025', '2025-13-01', '3/4/25', 'yesterday', '2025-04-03 25:00']) {
      expect(when(text)).toBe('importDate');
    }
  });

  it('is refused as what it is where a spreadsheet left its number', () => {
    expect([when('45021'), when('45021.5'), when('45021,25')]).toEqual(Array(3).fill('importDateSerial'));
  });
});

describe('A word in a cell', () => {
  it('is taken in either language', () => {
    expect(wordOfCell('kind', 'Desechable')).toBe('nonRefillable');
    expect(wordOfCell('what', 'RECUPERACIÓN')).toBe('recovery');
    expect(readWord('kind', 'bucket', '/kind')).toMatchObject({ refusals: [{ code: 'importWord', given: 'bucket' }] });
  });
});
