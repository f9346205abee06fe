import {
  addUp,
  type EmissionMasses,
  type EmissionSum,
  emissionLines,
  type SummedLine,
  totalOf,
} from '../../shared/books/emission-lines.ts';
import type { EmissionsQuery, EmissionsResponse } from '../../shared/books/emissions.schema.ts';
import { asReturned } from '../../shared/calculations/decimals.ts';
import { tonnesCo2e } from '../../shared/co2e/co2e.ts';
import type { GwpSet } from '../../shared/reference/gwp.ts';
import { citationOf, type Gwp, gwpOfRefrigerant } from '../../shared/reference/gwp-of-blend.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { csvGrams, csvText } from '../books/csv-table.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { columnHead } from '../messages/column-heads.ts';
import { readFirmMonths } from '../periods/firm-months.repository.ts';
import { type EmissionRow, readEmissions } from './emission.repository.ts';

type EmissionParts = Pick<Parts, 'dataSource' | 'reference'>;

/** What went to the atmosphere. A reader of some sites sees what was lost there. */
export function getEmissions(parts: EmissionParts, actor: Actor, query: EmissionsQuery): Promise<EmissionsResponse> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    const set = query.gwpSet ?? (await readFirmMonths(manager)).gwpSet;
    const rows = await readEmissions(manager, query);
    return present(parts, rows, query, set);
  });
}

function present(
  { reference }: EmissionParts,
  rows: readonly EmissionRow[],
  query: EmissionsQuery,
  set: GwpSet,
): EmissionsResponse {
  const lines = inOrder(emissionLines(rows.map((row) => underHead(row, query.by))), query.by);
  const gwps = new Map<string, Gwp | null>();
  for (const { refrigerant } of lines) {
    const found = gwpOfRefrigerant(reference, refrigerant, set);
    gwps.set(refrigerant, found.ok ? found.value : null);
  }
  const shown = lines.map(({ key, label, refrigerant, ...masses }) => {
    const gwp = gwps.get(refrigerant)?.gwp ?? null;
    return { key, label, refrigerant, ...inGrams(masses), ...co2e(masses, gwp), gwp };
  });
  const total = addUp(lines);
  const sumOf = (name: 'co2eT' | 'beforeOurCareCo2eT') =>
    asReturned(
      shown.reduce((sum, line) => sum + (line[name] ?? 0), 0),
      't',
    );
  return {
    items: itemsOf(rows),
    by: query.by,
    lines: shown.map((line) => ({
      ...line,
      co2eT: line.co2eT === null ? null : asReturned(line.co2eT, 't'),
      beforeOurCareCo2eT: line.beforeOurCareCo2eT === null ? null : asReturned(line.beforeOurCareCo2eT, 't'),
    })),
    total: {
      ...inGrams(total),
      co2eT: sumOf('co2eT'),
      beforeOurCareCo2eT: sumOf('beforeOurCareCo2eT'),
      notCovered: [...gwps].flatMap(([refrigerant, gwp]) => (gwp ? [] : [refrigerant])).sort(),
    },
    gwpSet: {
      name: set,
      sources: [...gwps].flatMap(([refrigerant, gwp]) => (gwp ? [{ refrigerant, source: citationOf(gwp) }] : [])),
    },
  };
}

/** Months as they follow each other, everything else by size. */
function inOrder(lines: readonly SummedLine[], by: EmissionsQuery['by']): readonly SummedLine[] {
  if (by === 'month') return lines;
  return lines.toSorted((a, b) => (totalOf(a) < totalOf(b) ? 1 : totalOf(a) > totalOf(b) ? -1 : 0));
}

/** Under which head a sum is counted. */
function underHead(row: EmissionRow, by: EmissionsQuery['by']): EmissionSum {
  const heads: Record<EmissionsQuery['by'], [key: string | null, label: string | null]> = {
    refrigerant: [row.refrigerant, row.refrigerant],
    month: [row.bookingMonth, row.bookingMonth],
    site: [row.siteId, row.siteName],
    customer: [row.customerId, row.customerName],
  };
  const [key, label] = heads[by];
  return {
    key,
    label,
    refrigerant: row.refrigerant,
    as: row.as,
    massMicrograms: BigInt(row.mass),
    atLeastMicrograms: BigInt(row.atLeast),
  };
}

const inGrams = (masses: EmissionMasses) => ({
  measuredG: gramsOfMicrograms(masses.measured),
  inferredG: gramsOfMicrograms(masses.inferred),
  hoseG: gramsOfMicrograms(masses.hose),
  totalG: gramsOfMicrograms(totalOf(masses)),
  atLeastG: gramsOfMicrograms(masses.atLeast),
  beforeOurCareG: gramsOfMicrograms(masses.beforeOurCare),
});

const co2e = (masses: EmissionMasses, gwp: number | null) => ({
  co2eT: gwp === null ? null : tonnesCo2e(gramsOfMicrograms(totalOf(masses)), gwp),
  beforeOurCareCo2eT: gwp === null ? null : tonnesCo2e(gramsOfMicrograms(masses.beforeOurCare), gwp),
});

/** By booking month, refrigerant and how, over all sites. */
function itemsOf(rows: readonly EmissionRow[]): EmissionsResponse['items'] {
  const sums = new Map<string, EmissionsResponse['items'][number] & { mass: bigint; atLeast: bigint }>();
  for (const { bookingMonth, refrigerant, as, mass, atLeast } of rows) {
    const key = `${bookingMonth} ${refrigerant} ${as}`;
    const earlier = sums.get(key) ?? { bookingMonth, refrigerant, as, massG: 0, atLeastG: 0, mass: 0n, atLeast: 0n };
    sums.set(key, { ...earlier, mass: earlier.mass + BigInt(mass), atLeast: earlier.atLeast + BigInt(atLeast) });
  }
  return [...sums.values()]
    .filter(({ mass, atLeast }) => mass !== 0n || atLeast !== 0n)
    .map(({ mass, atLeast, ...item }) => ({
      ...item,
      massG: gramsOfMicrograms(mass),
      atLeastG: gramsOfMicrograms(atLeast),
    }));
}

const COLUMNS = [
  'key',
  'label',
  'refrigerant',
  'measuredG',
  'inferredG',
  'hoseG',
  'totalG',
  'atLeastG',
  'beforeOurCareG',
  'gwp',
  'co2eT',
  'beforeOurCareCo2eT',
] as const;

export function emissionsCsv({ by, lines, gwpSet }: EmissionsResponse, locale: Locale): string {
  return csvText(
    [by, ...COLUMNS.slice(1), 'gwpSet'].map((name) => columnHead(name, locale)),
    lines.map((line) => [
      ...COLUMNS.map((column) => {
        const cell = line[column];
        return column.endsWith('G') ? csvGrams(cell as number) : cell;
      }),
      gwpSet.name,
    ]),
  );
}
