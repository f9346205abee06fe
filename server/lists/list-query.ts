import type { EntityManager } from 'typeorm';
import { decodeCursor, presentPage } from '../http/keyset.ts';
import { problemOfRefusals } from '../http/problem.ts';

/** One column of a sort: an SQL expression without values, and the type that its text form is read back as. */
export interface SortColumn {
  sql: string;
  type: 'text' | 'uuid' | 'bigint' | 'timestamptz' | 'date';
}

/** What PostgreSQL writes for each type, and so can read back: a cursor that was tampered with is refused, not an error. */
const READABLE: Record<SortColumn['type'], RegExp> = {
  text: /^/,
  uuid: /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/,
  bigint: /^-?\d{1,18}$/,
  timestamptz: /^\d{4}-[01]\d-[0-3]\d [0-2]\d:[0-5]\d:[0-5]\d(\.\d{1,6})?[+-][01]\d(:[0-5]\d)?$/,
  date: /^\d{4}-[01]\d-[0-3]\d$/,
};

/** All columns run one way, so that a page is one range of one index. The last one is unique in the firm. */
export interface Sort {
  columns: readonly SortColumn[];
  direction: 'asc' | 'desc';
}

/** Conditions and their values; `$` in a condition stands for the value that comes with it. */
export class Conditions {
  readonly values: unknown[] = [];
  private readonly clauses: string[] = [];

  /** Adds a condition without a value. */
  and(sql: string): this {
    this.clauses.push(sql);
    return this;
  }

  /** Adds a condition with a value, unless the value is absent. */
  andIf(sql: string, value: unknown): this {
    if (value === undefined || value === null) return this;
    return this.with(sql, value);
  }

  with(sql: string, ...values: unknown[]): this {
    const first = this.values.length;
    this.values.push(...values);
    let used = 0;
    this.clauses.push(sql.replaceAll('$', () => `$${first + (values.length === 1 ? 1 : ++used)}`));
    return this;
  }

  /** Each word of what was typed has to stand somewhere in the text, in any case and any place. */
  search(textSql: string, typed: string | undefined): this {
    for (const word of typed?.trim().split(/\s+/).slice(0, 8) ?? []) {
      if (word) this.with(`${textSql} ilike $`, `%${word.replaceAll(/[\\%_]/g, '\\$&')}%`);
    }
    return this;
  }

  get sql(): string {
    return this.clauses.length === 0 ? 'true' : this.clauses.join(' and ');
  }
}

export interface PageRequest {
  cursor?: string | undefined;
  limit: number;
}

/**
 * Reads one keyset page.
 *
 * @param select `select ... from ...` without `where`; its columns must not be named `sort_0`, `sort_1`, ...
 * @param of names list, sort and filters: a cursor of another one is refused
 */
export async function readPage<Row, Item>(
  manager: EntityManager,
  { select, from, joined, conditions, sort, page, of }: ListQuery,
  present: (row: Row) => Item,
): Promise<{ items: Item[]; nextCursor: string | null }> {
  const { columns, direction } = sort;
  if (page.cursor !== undefined) {
    const position = decodeCursor(of, page.cursor, columns.length);
    const fits = columns.every(({ type }, index) => READABLE[type].test(String(position[index])));
    if (!fits) throw problemOfRefusals([{ code: 'cursorNotValid', path: '/cursor' }]);
    const names = columns.map(({ sql }) => sql).join(', ');
    const places = columns.map(({ type }) => `$::${type}`).join(', ');
    conditions.with(`(${names}) ${direction === 'asc' ? '>' : '<'} (${places})`, ...position);
  }
  const keys = columns.map(({ sql }, index) => `(${sql})::text as sort_${index}`).join(', ');
  const order = columns.map(({ sql }) => `${sql} ${direction}`).join(', ');
  const range = `where ${conditions.sql} order by ${order} limit ${page.limit + 1}`;
  const rows = await manager.query<(Row & Record<string, string>)[]>(
    joined
      ? `select ${select}, ${keys} from (select ${joined.alias}.* from ${from} ${range}) ${joined.alias}
          ${joined.sql} order by ${order}`
      : `select ${select}, ${keys} from ${from} ${range}`,
    conditions.values,
  );
  return presentPage(rows, page.limit, of, (row) => columns.map((_, index) => row[`sort_${index}`] ?? null), present);
}

export interface ListQuery {
  select: string;
  from: string;
  /**
   * Joins made to the page alone, where conditions and sort speak of nothing but `from`'s alias. Joined before the limit
   * a planner that expects few rows reads the whole table.
   */
  joined?: { alias: string; sql: string };
  conditions: Conditions;
  sort: Sort;
  page: PageRequest;
  of: string;
}

/** What a cursor belongs to: the list with its sort and filters, the page itself left out. */
export function cursorScope(list: string, query: Record<string, unknown>): string {
  const { cursor: _cursor, limit: _limit, ...rest } = query;
  const parts = Object.entries(rest)
    .filter(([, value]) => value !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1));
  return JSON.stringify([list, ...parts]);
}
