import type { EntryGroupRequest } from '../entry-group.schema.ts';
import type { PlaceFields } from '../place.ts';
import { group, mass, START_AT } from './build.ts';
import type { ScenarioStart, SymbolicGroup } from './scenario.ts';

/** Turns the symbols of a case into ids. One symbol has one id; `fresh` makes one for what has no symbol. */
export interface SymbolIds {
  /** Of a cylinder, unit, party, tool, job, charge sheet or group. */
  idOf(symbol: string): string;
  fresh(): string;
}

/** A request as the API takes it. `deviceSentAt` is left out: a test that needs it adds it. */
export function toRequest(symbolic: SymbolicGroup, ids: SymbolIds): EntryGroupRequest {
  const idOrNull = (symbol: string | null | undefined) => (symbol ? ids.idOf(symbol) : null);
  const place = (fields: PlaceFields) => ({ ...fields, ...(fields.id ? { id: ids.idOf(fields.id) } : {}) });
  return {
    ...symbolic,
    schema: 1,
    groupId: ids.idOf(symbolic.groupId),
    unitId: idOrNull(symbolic.unitId),
    jobId: idOrNull(symbolic.jobId),
    chargeSheetId: idOrNull(symbolic.chargeSheetId),
    closesGroupId: idOrNull(symbolic.closesGroupId),
    readings: symbolic.readings.map((reading) => ({
      ...reading,
      id: ids.fresh(),
      cylinderId: ids.idOf(reading.cylinderId),
      toolId: idOrNull(reading.toolId),
    })),
    entries: symbolic.entries.map((entry) => ({
      ...entry,
      id: ids.fresh(),
      from: place(entry.from),
      to: place(entry.to),
    })),
    statements: (symbolic.statements ?? []).map((statement) => ({ ...statement, id: ids.idOf(statement.id) })),
  };
}

/** The opening entries of the cylinders, as groups to post. */
export function cylinderOpenings(start: ScenarioStart): SymbolicGroup[] {
  return Object.entries(start.cylinders).flatMap(([symbol, { contentG, refrigerant }]) =>
    contentG === null
      ? []
      : [
          group(`opening-${symbol}`, 'opening', START_AT, {
            entries: [mass(`opening -> ${symbol}`, contentG, { refrigerant })],
          }),
        ],
  );
}

/** The factory and opening entries of the units, which the server posts when a unit is registered. */
export function unitOpenings(start: ScenarioStart): SymbolicGroup[] {
  return Object.entries(start.units).flatMap(([symbol, { initial, refrigerant }]) => {
    if (initial.state === 'notKnown') return [];
    const isNew = initial.state === 'factory';
    return [
      group(`opening-${symbol}`, isNew ? 'factoryCharge' : 'opening', START_AT, {
        unitId: symbol,
        entries: [
          mass(`${initial.state} -> ${symbol}`, initial.massG, {
            refrigerant,
            howKnown: isNew ? 'factory' : 'estimated',
          }),
        ],
      }),
    ];
  });
}
