import type { CheckImportRequest, ImportView } from '../../shared/imports/import.schema.ts';
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
  table: Table;
  uploadedAt: number;
  state: ImportView['state'];
  request: CheckImportRequest | null;
  rowsDone: number;
  faults: RowFaults[];
  made: number;
  already: number;
}

const KEPT_MS = 2 * 60 * 60_000;
/** Files that one person may have read at a time; the oldest goes. */
const EACH = 3;
/** In the whole process, so that files cannot fill its memory. */
const MOST = 30;

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
      const oldest = held.size >= MOST ? idle()[0] : undefined;
      if (oldest) held.delete(oldest.id);
      if (held.size >= MOST) return false;
      held.set(stored.id, stored);
      return true;
    },
  };
}
export type ImportStore = ReturnType<typeof importStore>;
