import { CHECKS, QUESTIONS } from './1764547200004-posting-checks.ts';
import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * The one way into the log: `post_records(texts, derived)`. shared/journal/record.schema.ts says what the texts hold.
 *
 * Set-based on purpose. A row trigger that updates head and balances is quadratic inside one transaction, because every
 * row version it makes is walked by the next.
 */
export class CreatePosting1764547200004 extends ForwardOnlyMigration {
  readonly name = 'CreatePosting1764547200004';
  readonly statements = [HEAD, JOURNAL, GROUPS, ENTRIES, BOOKS, DERIVED, QUESTIONS, ...CHECKS, POST];
}

const HEAD = `
  create type balance_change as (
    place_key text, refrigerant text, place text, place_id uuid, place_as text,
    before_micrograms bigint, change_micrograms bigint);

  -- Refusals carry a SQLSTATE of class TW, the broken rule as constraint name, and figures as JSON detail.
  create function refuse(p_sqlstate text, p_rule text, p_detail jsonb) returns void language plpgsql as $$
  begin
    raise exception using errcode = p_sqlstate, message = p_rule, constraint = p_rule, detail = p_detail::text;
  end $$;

  create function lock_head() returns firm_head language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp as $$
  declare
    v_head firm_head;
  begin
    select h.* into v_head from firm_head h where h.firm_id = current_firm_id() for update;
    if not found then perform refuse('TW001', 'firm_in_scope', '{}'); end if;
    return v_head;
  end $$;
`;

const JOURNAL = `
  create function append_to_journal(p_head firm_head, p_texts text[], p_docs jsonb[]) returns bytea
    language plpgsql as $$
  declare
    v_content_hashes bytea[];
    v_hashes bytea[] := array[]::bytea[];
    v_hash bytea := p_head.hash;
    v_wrong jsonb;
  begin
    select jsonb_build_object('id', d.doc ->> 'id', 'recordedBy', d.doc ->> 'recordedBy') into v_wrong
      from unnest(p_docs) d(doc)
      where (d.doc ->> 'recordedBy')::uuid is distinct from current_person_id() limit 1;
    if found then perform refuse('TW003', 'recorded_by_is_actor', v_wrong); end if;

    v_content_hashes := array(
      select sha256(convert_to(t.content, 'UTF8')) from unnest(p_texts) with ordinality t(content, n) order by t.n);
    for i in 1 .. cardinality(p_texts) loop
      v_hash := sha256(int8send(p_head.sequence + i) || v_hash || v_content_hashes[i]);
      v_hashes[i] := v_hash;
    end loop;

    insert into journal_record (firm_id, sequence, type, record_id, content, content_hash, hash,
        noun, subject_id, version, recorded_at, recorded_by)
      select p_head.firm_id, p_head.sequence + r.n, r.doc ->> 'type', (r.doc ->> 'id')::uuid, r.content, r.content_hash, r.hash,
        r.doc ->> 'noun', (r.doc ->> 'subjectId')::uuid, (r.doc ->> 'version')::integer,
        (r.doc ->> 'recordedAt')::timestamptz, (r.doc ->> 'recordedBy')::uuid
      from unnest(p_texts, p_docs, v_content_hashes, v_hashes) with ordinality r(content, doc, content_hash, hash, n)
      order by r.n;
    return v_hash;
  end $$;
`;

/** Every column is taken from the chained text itself, so that the two cannot differ. */
const GROUPS = `
  create function insert_groups(p_head firm_head, p_docs jsonb[]) returns void language plpgsql as $$
  declare
    v_readings boolean;
    v_statements boolean;
    v_documents boolean;
  begin
    select bool_or(doc -> 'readings' <> '[]'), bool_or(doc -> 'statements' <> '[]'), bool_or(doc -> 'documents' <> '[]')
      into v_readings, v_statements, v_documents from unnest(p_docs) d(doc) where doc ->> 'type' = 'group';

    insert into entry_group (firm_id, id, sequence, kind, unit_id, site_id, job_id, charge_sheet_id, supervised_by,
        occurred_at, recorded_at, recorded_by, regulatory_day, zone_data_version, device_sent_at, device_skew_seconds,
        open_weigh_in, closes_group_id, reverses_group_id, replaces_group_id, answers_group_id, request_hash, reason)
      select p_head.firm_id, (doc ->> 'id')::uuid, p_head.sequence + n, doc ->> 'kind', (doc ->> 'unitId')::uuid,
        (doc ->> 'siteId')::uuid, (doc ->> 'jobId')::uuid, (doc ->> 'chargeSheetId')::uuid,
        (doc ->> 'supervisedBy')::uuid, (doc ->> 'occurredAt')::timestamptz, (doc ->> 'recordedAt')::timestamptz,
        (doc ->> 'recordedBy')::uuid, (doc ->> 'regulatoryDay')::date, doc ->> 'zoneDataVersion',
        (doc ->> 'deviceSentAt')::timestamptz,
        round(extract(epoch from (doc ->> 'recordedAt')::timestamptz - (doc ->> 'deviceSentAt')::timestamptz))::integer,
        (doc ->> 'openWeighIn')::boolean, (doc ->> 'closesGroupId')::uuid, (doc ->> 'reversesGroupId')::uuid,
        (doc ->> 'replacesGroupId')::uuid, (doc ->> 'answersGroupId')::uuid, decode(doc ->> 'requestHash', 'hex'),
        doc ->> 'reason'
      from unnest(p_docs) with ordinality d(doc, n) where doc ->> 'type' = 'group' order by n;

    if v_readings then
      insert into reading (firm_id, id, group_id, sequence, cylinder_id, tool_id, read_at, moment, mode, typed_value,
          typed_unit, mass_micrograms, hose_full, hose_value, hose_unit, hose_micrograms, resolution_g, repeatability_g,
          span_error_relative, offset_g)
        select p_head.firm_id, (r ->> 'id')::uuid, (doc ->> 'id')::uuid, p_head.sequence + n, (r ->> 'cylinderId')::uuid,
          (r ->> 'toolId')::uuid, coalesce(r ->> 'at', doc ->> 'occurredAt')::timestamptz, r ->> 'moment', r ->> 'mode',
          r ->> 'value', r ->> 'unit', (r ->> 'massMicrograms')::bigint, (r ->> 'hoseFull')::boolean,
          r #>> '{hose,value}', r #>> '{hose,unit}', (r ->> 'hoseMicrograms')::bigint,
          (r #>> '{scale,resolutionG}')::double precision, (r #>> '{scale,repeatabilityG}')::double precision,
          (r #>> '{scale,spanErrorRelative}')::double precision, (r #>> '{scale,offsetG}')::double precision
        from unnest(p_docs) with ordinality d(doc, n), jsonb_array_elements(doc -> 'readings') r
        where doc ->> 'type' = 'group' order by n;
    end if;

    if v_statements then
      insert into statement (firm_id, group_id, ordinal, sequence, unit_id, condition, shown_by, occurred_at)
        select p_head.firm_id, (doc ->> 'id')::uuid, o, p_head.sequence + n, (s ->> 'id')::uuid, s ->> 'is', s ->> 'by',
          (doc ->> 'occurredAt')::timestamptz
        from unnest(p_docs) with ordinality d(doc, n), jsonb_array_elements(doc -> 'statements') with ordinality a(s, o)
        where doc ->> 'type' = 'group' order by n, o;
    end if;

    if v_documents then
      insert into group_document (firm_id, group_id, ordinal, kind, number, dated, refrigerant, mass_micrograms,
          typed_value, typed_unit)
        select p_head.firm_id, (doc ->> 'id')::uuid, o, m ->> 'kind', m ->> 'number', (m ->> 'date')::date,
          m ->> 'refrigerant', (m ->> 'massMicrograms')::bigint, m #>> '{typed,value}', m #>> '{typed,unit}'
        from unnest(p_docs) with ordinality d(doc, n), jsonb_array_elements(doc -> 'documents') with ordinality a(m, o)
        where doc ->> 'type' = 'group' order by n, o;
    end if;
  end $$;
`;

const ENTRIES = `
  -- Entries meet their groups by hashing: nested loops over two long lists would be quadratic.
  create function insert_entries(p_head firm_head, p_docs jsonb[]) returns void language plpgsql
    set enable_nestloop = off as $$
  begin
    insert into entry (firm_id, id, sequence, group_id, kind, refrigerant, mass_micrograms, typed_value, typed_unit,
        from_place, from_id, from_as, to_place, to_id, to_as, how_known, occurred_at, recorded_at, recorded_by,
        booking_month, late, added_by_server, at_least, taken_back, corrects_group_id, reverses_entry_id, unit_id, site_id)
      select p_head.firm_id, (doc ->> 'id')::uuid, p_head.sequence + n, (doc ->> 'groupId')::uuid, g.kind,
        doc ->> 'refrigerant',
        (doc ->> 'massMicrograms')::bigint, doc #>> '{typed,value}', doc #>> '{typed,unit}',
        doc #>> '{from,place}', (doc #>> '{from,id}')::uuid, doc #>> '{from,as}',
        doc #>> '{to,place}', (doc #>> '{to,id}')::uuid, doc #>> '{to,as}', doc ->> 'howKnown',
        (doc ->> 'occurredAt')::timestamptz, (doc ->> 'recordedAt')::timestamptz,
        (doc ->> 'recordedBy')::uuid, doc ->> 'bookingMonth', (doc ->> 'late')::boolean, (doc ->> 'addedByServer')::boolean,
        (doc ->> 'atLeast')::boolean, (doc ->> 'takenBack')::boolean, (doc ->> 'correctsGroupId')::uuid,
        (doc ->> 'reversesEntryId')::uuid, (doc ->> 'unitId')::uuid, (doc ->> 'siteId')::uuid
      from unnest(p_docs) with ordinality d(doc, n)
      -- An entry without its group in this call is not inserted, and check_groups refuses the call.
      join (select u.doc ->> 'id' as id, u.doc ->> 'kind' as kind from unnest(p_docs) u(doc)
        where u.doc ->> 'type' = 'group') g on g.id = doc ->> 'groupId'
      where doc ->> 'type' = 'entry' order by n;
  end $$;
`;

const BOOKS = `
  create function balance_changes(p_head firm_head) returns balance_change[] language plpgsql stable as $$
  begin
    return (select coalesce(array_agg(
        row(c.place_key, c.refrigerant, c.place, c.id, c.place_as, coalesce(b.mass_micrograms, 0), c.change)::balance_change
        order by c.place_key, c.refrigerant), '{}')
      from (
        select p.place || coalesce(':' || p.id::text, ':' || p.place_as, '') as place_key, e.refrigerant, p.place, p.id,
            p.place_as, sum(p.mass)::bigint as change
          from entry e
          cross join lateral (values
            (e.to_place::text, e.to_id, e.to_as::text, e.mass_micrograms),
            (e.from_place::text, e.from_id, e.from_as::text, -e.mass_micrograms)) p(place, id, place_as, mass)
          where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
          group by p.place, p.id, p.place_as, e.refrigerant) c
      left join lateral (select x.mass_micrograms from balance x
        where x.firm_id = p_head.firm_id and x.place_key = c.place_key and x.refrigerant = c.refrigerant offset 0) b on true);
  end $$;

  create function add_to_books(p_head firm_head, p_changes balance_change[]) returns void language plpgsql as $$
  begin
    -- The new balance and not the change, which the check on cylinders would refuse before it is added. The head is locked.
    insert into balance (firm_id, place_key, refrigerant, place, place_id, place_as, mass_micrograms)
      select p_head.firm_id, c.place_key, c.refrigerant, c.place, c.place_id, c.place_as,
        c.before_micrograms + c.change_micrograms
      from unnest(p_changes) c
      on conflict (firm_id, place_key, refrigerant)
        do update set mass_micrograms = excluded.mass_micrograms;

    insert into month_sum as m (firm_id, month, refrigerant, from_kind, to_kind, mass_micrograms, entry_count)
      select p_head.firm_id, e.booking_month, e.refrigerant, e.from_place || coalesce(':' || e.from_as, ''),
        e.to_place || coalesce(':' || e.to_as, ''), sum(e.mass_micrograms)::bigint, count(*)
      from entry e where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
      group by 2, 3, 4, 5 order by 2, 3, 4, 5
      on conflict (firm_id, month, refrigerant, from_kind, to_kind)
        do update set mass_micrograms = m.mass_micrograms + excluded.mass_micrograms,
          entry_count = m.entry_count + excluded.entry_count;
  end $$;
`;

/** What the server judged: snapshots of places, flags, and words kept beside the chain. */
const DERIVED = `
  create function store_derived(p_head firm_head, p_record_count integer, p_derived jsonb) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    if p_derived ? 'placeStates' then
      insert into place_state as s (firm_id, place, place_id, known, state, last_occurred_at, sequence)
        select p_head.firm_id, d.place, d.id, d.known, coalesce(d.state, '{}'), d."lastOccurredAt",
          p_head.sequence + p_record_count
        from jsonb_to_recordset(p_derived -> 'placeStates')
          d(place text, id uuid, known boolean, state jsonb, "lastOccurredAt" timestamptz)
        on conflict (firm_id, place, place_id) do update
          set known = excluded.known, state = excluded.state, last_occurred_at = excluded.last_occurred_at,
            sequence = excluded.sequence;
    end if;

    if p_derived ?| array['flagsOpened', 'flagsChanged', 'flagsClosed'] then
      insert into flag (firm_id, id, code, subject_kind, subject_id, group_id, refrigerant, mass_micrograms, figures,
          standing, opened_at, opened_by_group_id)
        select p_head.firm_id, f.id, f.code, f."subjectKind", f."subjectId", f."groupId", f.refrigerant,
          f."massMicrograms", coalesce(f.figures, '{}'), f.standing, f.at, f."openedByGroupId"
        from jsonb_to_recordset(p_derived -> 'flagsOpened')
          f(id uuid, code text, "subjectKind" text, "subjectId" uuid, "groupId" uuid, refrigerant text,
            "massMicrograms" bigint, figures jsonb, standing boolean, at timestamptz, "openedByGroupId" uuid);
      update flag set mass_micrograms = f."massMicrograms", figures = coalesce(f.figures, '{}')
        from jsonb_to_recordset(p_derived -> 'flagsChanged') f(id uuid, "massMicrograms" bigint, figures jsonb)
        where flag.firm_id = p_head.firm_id and flag.id = f.id and flag.closed_at is null;
      update flag set closed_at = f.at, closed_by_group_id = f."closedByGroupId"
        from jsonb_to_recordset(p_derived -> 'flagsClosed') f(id uuid, at timestamptz, "closedByGroupId" uuid)
        where flag.firm_id = p_head.firm_id and flag.id = f.id and flag.closed_at is null;
    end if;

    if p_derived ? 'texts' then
      insert into personal_text (firm_id, id, record_id, field, salt, content, hash)
        select p_head.firm_id, t.id, t."recordId", t.field, decode(t.salt, 'hex'), t.content,
          sha256(decode(t.salt, 'hex') || convert_to(t.content, 'UTF8'))
        from jsonb_to_recordset(p_derived -> 'texts')
          t(id uuid, "recordId" uuid, field text, salt text, content text);
      select jsonb_build_object('id', t.id, 'recordId', t.record_id) into v_wrong
        from jsonb_to_recordset(p_derived -> 'texts') d(id uuid)
        cross join lateral (select x.id, x.record_id, x.hash from personal_text x
          where x.firm_id = p_head.firm_id and x.id = d.id offset 0) t
        cross join lateral (select x.sequence, x.content from journal_record x
          where x.firm_id = p_head.firm_id and x.record_id = t.record_id offset 0) j
        where j.sequence <= p_head.sequence or position(encode(t.hash, 'hex') in j.content) = 0 limit 1;
      if found then perform refuse('TW017', 'text_hash_in_record', v_wrong); end if;
    end if;
  end $$;
`;

const POST = `
  -- A pooled connection may have planned these statements while the tables were small, or for a firm that the statistics
  -- do not know: no sequential scans, and plans that hold for an average firm.
  create function post_records(p_texts text[], p_derived jsonb default '{}')
    returns table (record_id uuid, sequence bigint, hash bytea)
    language plpgsql security definer
    set search_path = pg_catalog, public, pg_temp set timezone = 'UTC' set datestyle = 'ISO'
    set enable_seqscan = off set plan_cache_mode = force_generic_plan as $$
  declare
    v_head firm_head := lock_head();
    v_docs jsonb[] := array(select t.content::jsonb from unnest(p_texts) with ordinality t(content, n) order by t.n);
    v_hash bytea;
    v_changes balance_change[];
    v_has_groups boolean;
  begin
    p_derived := coalesce(p_derived, '{}');
    if coalesce(cardinality(p_texts), 0) = 0 then perform refuse('TW002', 'record_form', '{}'); end if;
    v_hash := append_to_journal(v_head, p_texts, v_docs);
    select bool_or(d.doc ->> 'type' <> 'register') into v_has_groups from unnest(v_docs) d(doc);
    if v_has_groups then
      perform insert_groups(v_head, v_docs);
      perform insert_entries(v_head, v_docs);
      perform check_groups(v_head, v_docs);
      perform check_months(v_head);
      v_changes := balance_changes(v_head);
      perform check_places(v_head, v_changes);
      perform check_cylinder_floor(v_changes);
      perform add_to_books(v_head, v_changes);
      perform check_cylinder_contents(v_head, v_changes);
    end if;
    if p_derived ? 'placeStates' then perform check_known(v_head, p_derived); end if;
    perform store_derived(v_head, cardinality(p_texts), p_derived);
    perform check_units(v_head, v_changes, p_derived);
    update firm_head h set sequence = v_head.sequence + cardinality(p_texts), hash = v_hash
      where h.firm_id = v_head.firm_id;
    return query select j.record_id, j.sequence, j.hash::bytea from journal_record j
      where j.firm_id = v_head.firm_id and j.sequence > v_head.sequence order by j.sequence;
  end $$;
`;
