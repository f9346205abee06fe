import { z } from 'zod';
import { roundTo, snap12, snapSum } from '../units/round.ts';
import { type GwpComponent, gwpComponent } from './gwp.ts';
import { type FlareJoint, flareJoint } from './joint.ts';
import { type Refrigerant, refrigerant } from './refrigerant.ts';
import { type SaturationTable, saturationTable } from './saturation-table.ts';
import { type Tube, tube } from './tube.ts';

/** Tables as read, before any check. `saturation` is keyed by designation. */
export interface RawTables {
  refrigerants: unknown;
  gwp: unknown;
  tubes: unknown;
  joints: unknown;
  saturation: Readonly<Record<string, unknown>>;
}

export interface Table<Row> {
  version: string;
  rows: readonly Row[];
}

export interface CheckedTables {
  refrigerants: Table<Refrigerant>;
  gwp: Table<GwpComponent>;
  tubes: Table<Tube>;
  joints: Table<FlareJoint>;
  saturation: readonly SaturationTable[];
}

/** A table in `data/` that cannot be used. The message names the file, the row and the column. */
export class BadTable extends Error {
  override readonly name = 'BadTable';
}

const envelope = z.strictObject({ version: z.string().min(1), rows: z.array(z.unknown()).min(1) });

const firstIssue = (error: z.ZodError) => {
  const issue = error.issues[0];
  return `${issue?.path.join('.') || '(whole)'}: ${issue?.message}`;
};

/**
 * Checks every table by its schema and by what must hold inside it (areas follow from diameters, a composition adds
 * up, pressures rise with temperature). Throws `BadTable` at the first fault: a program with a wrong table must not run.
 */
export function checkTables(raw: RawTables): CheckedTables {
  const components = rowsOf('data/gwp.json', raw.gwp, gwpComponent, (row) => row.component);
  const known = new Set(components.rows.map((row) => row.component));
  return {
    gwp: components,
    refrigerants: rowsOf(
      'data/refrigerants.json',
      raw.refrigerants,
      refrigerant,
      (row) => row.designation,
      (row) => refrigerantFault(row, known),
    ),
    tubes: rowsOf(
      'data/tubes.json',
      raw.tubes,
      tube,
      (row) => `${row.standard} ${row.nominal} ${row.temper}`,
      tubeFault,
    ),
    joints: rowsOf('data/joints.json', raw.joints, flareJoint, (row) => row.nominal, jointFault),
    saturation: Object.entries(raw.saturation).map(([designation, table]) => saturationOf(designation, table)),
  };
}

function rowsOf<Row>(
  file: string,
  raw: unknown,
  schema: z.ZodType<Row>,
  nameOf: (row: Row) => string,
  faultOf: (row: Row) => string | null = () => null,
): Table<Row> {
  const table = envelope.safeParse(raw);
  if (!table.success) throw new BadTable(`${file}: ${firstIssue(table.error)}`);
  const seen = new Set<string>();
  const rows = table.data.rows.map((rawRow, index) => {
    const row = schema.safeParse(rawRow);
    if (!row.success) throw new BadTable(`${file}, row ${index + 1}: ${firstIssue(row.error)}`);
    const name = nameOf(row.data);
    const fault = seen.has(name) ? 'appears twice' : faultOf(row.data);
    if (fault) throw new BadTable(`${file}, row ${index + 1} (${name}): ${fault}`);
    seen.add(name);
    return row.data;
  });
  return { version: table.data.version, rows };
}

function refrigerantFault(row: Refrigerant, known: ReadonlySet<string>): string | null {
  const parts = row.composition ?? [{ component: row.designation, massPct: 100 }];
  const unknown = parts.find((part) => !known.has(part.component));
  if (unknown) return `composition: no GWP row for ${unknown.component}`;
  const total = snapSum(...parts.map((part) => part.massPct));
  if (total !== 100) return `composition: adds up to ${total} %`;
  const isFlammable = !row.safetyClass.endsWith('1');
  if (isFlammable !== (row.lflKgM3 !== null)) return `lflKgM3: ${row.lflKgM3} for class ${row.safetyClass}`;
  return null;
}

/** Printed figures carry two decimals in mm2 and three in mm. */
function tubeFault(row: Tube): string | null {
  const idMm = roundTo(row.odMm - 2 * row.wallMm, 3);
  if (snap12(Math.abs(idMm - row.idMm)) > 0.001) return `idMm: ${row.idMm}, but od - 2 x wall is ${idMm}`;
  const areaMm2 = (Math.PI / 4) * row.idMm ** 2;
  if (Math.abs(areaMm2 - row.internalAreaMm2) > 0.005 + 0.0005 * Math.PI * row.idMm * 0.5) {
    return `internalAreaMm2: ${row.internalAreaMm2}, but pi/4 x id2 is ${roundTo(areaMm2, 3)}`;
  }
  const volumeLPerM = row.internalAreaMm2 / 1000;
  if (snap12(Math.abs(volumeLPerM - row.internalVolumeLPerM)) > 0.00001) {
    return `internalVolumeLPerM: ${row.internalVolumeLPerM}, but the area makes it ${volumeLPerM}`;
  }
  return null;
}

function jointFault(row: FlareJoint): string | null {
  if (row.torqueMinNm >= row.torqueMaxNm) return `torqueMinNm: ${row.torqueMinNm} is not below ${row.torqueMaxNm}`;
  return null;
}

function saturationOf(designation: string, raw: unknown): SaturationTable {
  const file = `data/saturation/${designation}.json`;
  const parsed = saturationTable.safeParse(raw);
  if (!parsed.success) throw new BadTable(`${file}: ${firstIssue(parsed.error)}`);
  const table = parsed.data;
  if (table.designation !== designation) throw new BadTable(`${file}: designation: ${table.designation}`);
  const columns = ['bubbleKPaAbs', 'dewKPaAbs', 'vapourDensityKgM3', 'liquidDensityKgM3'] as const;
  const rows = table.bubbleKPaAbs.length;
  for (const column of columns) {
    const values = table[column];
    if (values.length !== rows || rows < 2)
      throw new BadTable(`${file}: ${column}: ${values.length} rows, not ${rows}`);
    const falls = column === 'liquidDensityKgM3';
    values.forEach((value, row) => {
      const before = values[row - 1];
      const wrongWay = before !== undefined && (falls ? value >= before : value <= before);
      const dewAboveBubble = column === 'dewKPaAbs' && value > (table.bubbleKPaAbs[row] as number);
      if (!wrongWay && !dewAboveBubble) return;
      const at = `row ${row + 1} (${table.minTempC + row} °C)`;
      const fault = wrongWay ? `does not ${falls ? 'fall' : 'rise'} with temperature` : 'is above the bubble pressure';
      throw new BadTable(`${file}, ${at}: ${column}: ${value} ${fault}`);
    });
  }
  return table;
}
