import { useEffect, useState } from 'react';
import gwp from '../../../data/gwp.json';
import refrigerants from '../../../data/refrigerants.json';
import tubes from '../../../data/tubes.json';
import type { CompileFormula } from '../../../shared/charge/formula-contract.ts';
import { pipeSizes } from '../../../shared/charge/pipe-size.ts';
import { buildReferenceData } from '../../../shared/reference/build-reference-data.ts';
import type { CheckedTables } from '../../../shared/reference/check-tables.ts';
import type { ReferenceData } from '../../../shared/reference/reference-data.ts';
import type { SaturationTable } from '../../../shared/reference/saturation-table.ts';

/** One file for each refrigerant; a phone loads the one that was chosen. Tests check every table by its schema. */
const SATURATION = import.meta.glob<SaturationTable>('../../../data/saturation/*.json', { import: 'default' });

const tables = { refrigerants, gwp, tubes, joints: { version: '', rows: [] } } as unknown as Omit<
  CheckedTables,
  'saturation'
>;
const without = buildReferenceData({ ...tables, saturation: [] });
const loaded = new Map<string, ReferenceData>();

export const allRefrigerants = tables.refrigerants.rows;
export const allTubes = tables.tubes.rows;
export const sizesOfPipe = pipeSizes(allTubes);

async function loadSaturation(designation: string): Promise<ReferenceData> {
  const known = loaded.get(designation);
  if (known) return known;
  const load = SATURATION[`../../../data/saturation/${designation}.json`];
  const data = load ? buildReferenceData({ ...tables, saturation: [await load()] }) : without;
  loaded.set(designation, data);
  return data;
}

/**
 * The reference tables with the saturation table of this refrigerant. The charge needs none, so that it is worked out
 * at once; `settled` is false while the table, and with it the plausibility of the rate, is on its way.
 */
export function useReference(designation: string): { reference: ReferenceData; settled: boolean } {
  const [, redraw] = useState(0);
  const [failed, setFailed] = useState('');
  const ready = designation === '' ? without : loaded.get(designation);
  useEffect(() => {
    if (ready) return;
    let current = true;
    loadSaturation(designation).then(
      () => current && redraw((n) => n + 1),
      // Without the network the charge still stands; only the comparison with the pipe is missing, and says so.
      () => current && setFailed(designation),
    );
    return () => {
      current = false;
    };
  }, [designation, ready]);
  return { reference: ready ?? without, settled: ready !== undefined || failed === designation };
}

let compiler: CompileFormula | undefined;

/** The parser of the formula kind, fetched when somebody chooses it. */
export function useFormulaCompiler(wanted: boolean): { compileFormula: CompileFormula | undefined; failed: boolean } {
  const [, redraw] = useState(0);
  const [failed, setFailed] = useState(false);
  useEffect(() => {
    if (!wanted || compiler) return;
    let current = true;
    import('../../../shared/charge/formula.ts').then(
      (module) => {
        compiler = module.compileFormula;
        if (current) redraw((n) => n + 1);
      },
      () => current && setFailed(true),
    );
    return () => {
      current = false;
    };
  }, [wanted]);
  return { compileFormula: compiler, failed };
}
