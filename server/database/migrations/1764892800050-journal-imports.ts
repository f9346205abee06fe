import { ForwardOnlyMigration } from './forward-only-migration.ts';

/** That a table was brought in is a record of the chain, of noun `import`: it stands for no row of a register. */
export class JournalImports1764892800050 extends ForwardOnlyMigration {
  readonly name = 'JournalImports1764892800050';
  readonly statements = [NOUN];
}

/** Adds to the closed list as it stands, whichever migration has widened it before. */
const NOUN = `
  do $$
  declare
    v_nouns text[] := array(
      select distinct (regexp_matches(pg_get_constraintdef(c.oid), '''([A-Za-z]+)''::text', 'g'))[1]
        from pg_constraint c where c.conname = 'journal_record_noun_check'
      union select 'import');
  begin
    alter table journal_record drop constraint journal_record_noun_check;
    execute format('alter table journal_record add constraint journal_record_noun_check check (noun in (%s))',
      (select string_agg(quote_literal(n), ', ' order by n) from unnest(v_nouns) n));
  end $$;
`;
