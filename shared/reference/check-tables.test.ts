import { describe, expect, it } from 'vitest';
import { buildReferenceData } from './build-reference-data.ts';
import { BadTable, checkTables, type RawTables } from './check-tables.ts';
import { everyTable } from './every-table.ts';

const tables = checkTables(everyTable);

/** The tables with one changed, as a JSON copy. */
function changed(change: (tables: RawTablesAsJson) => void): RawTables {
  const copy = JSON.parse(JSON.stringify(everyTable)) as RawTablesAsJson;
  change(copy);
  return copy;
}
interface RawTablesAsJson extends RawTables {
  refrigerants: { rows: Record<string, unknown>[] };
  gwp: { rows: Record<string, unknown>[] };
  tubes: { rows: Record<string, unknown>[] };
  joints: { rows: Record<string, unknown>[] };
  saturation: Record<string, { bubbleKPaAbs: number[]; dewKPaAbs: number[]; liquidDensityKgM3: number[] }>;
}
const fault = (change: (tables: RawTablesAsJson) => void) => () => checkTables(changed(change));
const row = (rows: Record<string, unknown>[], number: number) => rows[number - 1] as Record<string, unknown>;
const r32 = (copy: RawTablesAsJson) => copy.saturation['R-32'] as RawTablesAsJson['saturation'][string];

describe('The reference tables', () => {
  it('hold 31 refrigerants, each with its saturation table', () => {
    const reference = buildReferenceData(tables);
    expect(reference.refrigerantDesignations()).toHaveLength(31);
    for (const designation of reference.refrigerantDesignations()) {
      expect(reference.findSaturationTable(designation)?.designation).toBe(designation);
      expect(reference.versions[`saturation/${designation}`]).toMatch(/^\d{4}-\d\d-\d\d$/);
    }
    expect(reference.findRefrigerant('R-9999')).toBeNull();
  });

  it('print ASTM B280 areas that are pi/4 of the squared inside diameter', () => {
    const copper = tables.tubes.rows.filter((tube) => tube.standard === 'ASTM B280');
    expect(copper).toHaveLength(20);
    for (const tube of copper) {
      // Inside diameters from the inch walls: 1/4 in with 0.030 in leaves 4.826 mm.
      const areaMm2 = (Math.PI / 4) * (tube.odMm - 2 * tube.wallMm) ** 2;
      expect(Math.abs(areaMm2 - tube.internalAreaMm2)).toBeLessThan(0.02 + tube.internalAreaMm2 * 0.0002);
    }
  });

  it('convert joint torques between N m and ft lbf within the printed decimal', () => {
    for (const joint of tables.joints.rows) {
      expect(Math.abs(joint.torqueMinNm / 1.355817948331 - joint.torqueMinFtLbf)).toBeLessThan(0.05001);
      expect(Math.abs(joint.torqueMaxNm / 1.355817948331 - joint.torqueMaxFtLbf)).toBeLessThan(0.05001);
    }
  });
});

describe('A bad table', () => {
  it('is named with file, row and column', () => {
    expect(fault((copy) => Object.assign(row(copy.tubes.rows, 3), { wallMm: -1 }))).toThrow(
      /^data\/tubes\.json, row 3: wallMm: /,
    );
    expect(fault((copy) => Object.assign(row(copy.joints.rows, 1), { colour: 'red' }))).toThrow(
      /^data\/joints\.json, row 1: /,
    );
    expect(fault((copy) => Object.assign(copy.gwp, { version: '' }))).toThrow(/^data\/gwp\.json: version: /);
    expect(fault((copy) => Object.assign(copy.gwp, { version: '' }))).toThrow(BadTable);
  });

  it('is refused when its figures contradict one another', () => {
    expect(fault((copy) => Object.assign(row(copy.tubes.rows, 1), { internalAreaMm2: 19.28 }))).toThrow(
      'data/tubes.json, row 1 (ASTM B280 1/4 in annealed coil): internalAreaMm2: 19.28, but pi/4 x id2 is 18.292',
    );
    expect(fault((copy) => Object.assign(row(copy.tubes.rows, 1), { idMm: 4.9 }))).toThrow(/idMm: 4.9/);
    expect(fault((copy) => Object.assign(row(copy.tubes.rows, 1), { internalVolumeLPerM: 0.18 }))).toThrow(
      /VolumeLPerM/,
    );
    expect(fault((copy) => Object.assign(row(copy.joints.rows, 1), { torqueMinNm: 20 }))).toThrow(/torqueMinNm: 20/);
    expect(fault((copy) => copy.gwp.rows.push(row(copy.gwp.rows, 1)))).toThrow(/R-32\): appears twice/);
  });

  it('is refused when a composition does not add up or names what has no GWP', () => {
    const composed = (composition: unknown) => (copy: RawTablesAsJson) =>
      Object.assign(row(copy.refrigerants.rows, 4), { composition });
    expect(fault(composed([{ component: 'R-32', massPct: 99.9 }]))).toThrow('R-404A): composition: adds up to 99.9 %');
    expect(fault(composed([{ component: 'R-999', massPct: 100 }]))).toThrow('no GWP row for R-999');
  });

  it('is refused when a flammable refrigerant has no lower flammable limit', () => {
    expect(fault((copy) => Object.assign(row(copy.refrigerants.rows, 2), { lflKgM3: null }))).toThrow(
      'data/refrigerants.json, row 2 (R-32): lflKgM3: null for class A2L',
    );
  });

  it('is refused when a saturation column turns back, ends early or crosses the other', () => {
    const set = (column: 'bubbleKPaAbs' | 'dewKPaAbs' | 'liquidDensityKgM3', at: number, value: number) =>
      fault((copy) => {
        r32(copy)[column][at] = value;
      });
    expect(set('bubbleKPaAbs', 50, 700)).toThrow(/^data\/saturation\/R-32\.json, row 51 \(0 °C\): bubbleKPaAbs: 700 /);
    expect(set('liquidDensityKgM3', 50, 1200)).toThrow(/liquidDensityKgM3: 1200 does not fall/);
    expect(set('dewKPaAbs', 115, 9999)).toThrow(/above the bubble pressure/);
    expect(fault((copy) => r32(copy).dewKPaAbs.pop())).toThrow(/dewKPaAbs: 115 rows, not 116/);
    expect(fault((copy) => Object.assign(r32(copy), { designation: 'R-22' }))).toThrow(/designation: R-22/);
  });
});
