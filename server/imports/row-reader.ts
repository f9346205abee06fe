import { TZDate } from '@date-fns/tz';
import type { CheckImportRequest } from '../../shared/imports/import.schema.ts';
import { readMass, readWhen, readWord } from '../../shared/imports/read-cells.ts';
import type { Outcome, Refusal } from '../../shared/problems/outcome.ts';
import type { TypedMass } from '../../shared/units/mass.ts';
import { derivedId } from './derived-id.ts';
import type { Index } from './import.repository.ts';
import type { TableRow } from './table.ts';

/** Something in a cell that cannot be taken; `field` null: the row as a whole. */
export interface RowFault {
  field: string | null;
  refusal: Refusal;
}

export interface RowReaderOptions {
  request: CheckImportRequest;
  firmId: string;
  kind: string;
  /** Rows that are alike in one file are different things: the first, the second ... */
  occurrence: number;
}

/** One row as its fields; what cannot be read is kept as a fault of its field. */
export function rowReader(row: TableRow, { request, firmId, kind, occurrence }: RowReaderOptions) {
  const faults: RowFault[] = [];
  const text = (field: string): string | null => {
    const column = request.columns[field];
    const cell = column === undefined ? '' : (row.cells[column] ?? '');
    return cell === '' ? null : cell;
  };
  const fault = (field: string | null, code: string, more: Partial<Refusal> = {}): null => {
    const given = field === null ? null : text(field);
    faults.push({
      field,
      refusal: { code, path: `/${field ?? ''}`, given, params: { given: given ?? '' }, ...more },
    });
    return null;
  };
  const taken = <T>(field: string, outcome: Outcome<T>): T | null => {
    if (outcome.ok) return outcome.value;
    for (const refusal of outcome.refusals) faults.push({ field, refusal });
    return null;
  };
  return {
    row,
    faults,
    /** The day from which the import holds. */
    since: request.since,
    fault,
    text,
    required: (field: string): string => text(field) ?? fault(field, 'required') ?? '',
    mass(field: string): TypedMass | null {
      const cell = text(field);
      return cell === null ? null : taken(field, readMass(cell, request, `/${field}`));
    },
    /** A day; of a day with its time the day. */
    day(field: string): string | null {
      const cell = text(field);
      return cell === null ? null : (taken(field, readWhen(cell, request, `/${field}`))?.day ?? null);
    },
    /** The instant of a cell in a zone; without a time at `hour`; without a cell the day from which the import holds. */
    instant(field: string, timeZone: string, hour: number): string {
      const cell = text(field);
      const when = cell === null ? null : taken(field, readWhen(cell, request, `/${field}`));
      const { day, time } = when ?? { day: request.since, time: null };
      const [year = 0, month = 1, date = 1] = day.split('-').map(Number);
      const [hours = hour, minutes = 0] = time === null ? [] : time.split(':').map(Number);
      return new Date(new TZDate(year, month - 1, date, hours, minutes, timeZone).getTime()).toISOString();
    },
    word(field: string, fallback: string | null): string {
      const cell = text(field);
      if (cell === null) return fallback ?? fault(field, 'required') ?? '';
      return taken(field, readWord(field, cell, `/${field}`)) ?? fallback ?? '';
    },
    /** What a cell calls by its name. */
    named<T>(field: string, index: Index<T>): T | null {
      const cell = text(field);
      if (cell === null) return null;
      const found = index.find(cell);
      if (found.is === 'one') return found.value;
      return fault(field, found.is === 'none' ? 'importNotFound' : 'importSeveral');
    },
    /** The same for the same row of the same firm, always. */
    id: (part: string): string => derivedId(firmId, kind, String(occurrence), part, ...trimmed(row.cells)),
  };
}
export type RowReader = ReturnType<typeof rowReader>;

/** Empty columns at the end come and go with the program that saved the file. */
function trimmed(cells: readonly string[]): string[] {
  return cells.slice(0, cells.findLastIndex((cell) => cell !== '') + 1);
}
