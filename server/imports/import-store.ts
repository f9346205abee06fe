import { type CheckImportRequest, IMPORT_LIMITS, type ImportView } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import type { RowFaults } from './plan-rows.ts';
import type { Table } from './table.ts';

/** A file that was read, and how far it is. It lives in this process alone: what counts stands in the log. */
export interface StoredImport {
  id: string;
  firmId: string;
  personId: string;
  kind: ImportKind;
  fileName: string;
  sizeBytes: number;
  sha256: string;
  table: Table;
  /** What every answer says of the columns. */
  shown: Pick<ImportView, 'columns' | 'fields'>;
  uploadedAt: number;
  state: ImportView['state'];
  request: CheckImportRequest | null;
  rowsDone: number;
  faults: readonly RowFaults[];
  made: number;
  already: number;
  recordSequence: number | null;
  /** Code of what broke it off. */
  problem: string | null;
  /** Somebody asked for it to end; between two parts of the rows it does. */
  isCancelled: boolean;
}

const KEPT_MS = 2 * 60 * 60_000;
/** Files that one person may have read at a time; the oldest goes. */
const EACH = 3;
/** In the whole process, so that files cannot fill its memory. */
const MOST = 30;

/** Characters of all tables that are held: what a file may come to in memory, some ten times over. */
const MOST_CHARACTERS = 10 * IMPORT_LIMITS.unpackedBytes;

const charactersOf = ({ table }: StoredImport): number =>
  table.rows.reduce((sum, { cells }) => sum + cells.reduce((row, cell) => row + cell.length, cells.length), 0);

const isBusy = ({ state }: StoredImport): boolean => state === 'checking' || state === 'running';

export function importStore() {
  const held = new Map<string, StoredImport>();
  return {
    find: (id: string, firmId: string): StoredImport | null => {
      const found = held.get(id);
      return found && found.firmId === firmId ? found : null;
    },
    isFirmBusy: (firmId: string): boolean => [...held.values()].some((each) => each.firmId === firmId && isBusy(each)),
    /** False: too many are at work to take another. */
    add(stored: StoredImport): boolean {
      const idle = () => [...held.values()].filter((each) => !isBusy(each));
      for (const each of idle()) if (each.uploadedAt < stored.uploadedAt - KEPT_MS) held.delete(each.id);
      const own = idle().filter(({ personId }) => personId === stored.personId);
      for (const each of own.slice(0, Math.max(0, own.length - EACH + 1))) held.delete(each.id);
      const room = charactersOf(stored);
      const isFull = () =>
        held.size >= MOST || [...held.values()].reduce((sum, each) => sum + charactersOf(each), room) > MOST_CHARACTERS;
      while (isFull()) {
        const [oldest] = idle();
        if (!oldest) return false;
        held.delete(oldest.id);
      }
      held.set(stored.id, stored);
      return true;
    },
  };
}
export type ImportStore = ReturnType<typeof importStore>;
