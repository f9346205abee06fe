import { describe, expect, it } from 'vitest';
import { EXPORT_TABLES } from '../../../shared/exports/export.schema.ts';
import { STATEMENT_CSV_COLUMNS } from '../../../shared/statements/cylinder-statement.schema.ts';
import { columnHead } from '../../messages/column-heads.ts';
import { inWordsOf } from './table.ts';
import { tableRows } from './tables.ts';

/** What PostgreSQL keeps of a name. */
const LONGEST_BYTES = 63;

describe.each(['en-US', 'es-ES'] as const)('The heads of a table in %s', (locale) => {
  it.each(EXPORT_TABLES)('are words for each column, no two the same, as long as the database keeps: %s', (what) => {
    const rows = tableRows({ what, filters: { sort: what === 'entries' ? '-sequence' : 'tag' } } as never);
    const heads = inWordsOf(rows, locale).columns.map(([head]) => head);
    expect(heads.filter((head) => /[a-z][A-Z]\w/.test(head.replace(/\(kPa.*\)/, '')))).toEqual([]);
    expect(new Set(heads).size).toBe(heads.length);
    for (const head of heads) {
      expect(Buffer.byteLength(head)).toBeLessThanOrEqual(LONGEST_BYTES);
      expect(head).not.toMatch(/[",]/);
    }
  });

  it('name the unit of what is measured, and are words in a statement too', () => {
    for (const name of ['massG', 'tareG', 'grossG', 'differenceG', 'twoUG'])
      expect(columnHead(name, locale)).toMatch(/ \(g\)$/);
    const heads = STATEMENT_CSV_COLUMNS.map((name) => columnHead(name, locale));
    expect(heads.filter((each) => /[a-z][A-Z]/.test(each))).toEqual([]);
  });
});
