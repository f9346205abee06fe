/**
 * The rules of the log, checked over all rows of one call; part of migration 1764547200004 and never edited again.
 *
 * `offset 0` keeps a look-up a look-up by its key, and the rows of this call those of its sequences. Otherwise a plan
 * may read all rows of a firm for each group: for a firm that the statistics do not know yet, PostgreSQL takes any index
 * that starts with the firm for equally good, and a large call becomes quadratic (100,000 entries: 207 s instead of 14).
 */
export const CHECKS: readonly string[] = [
  // Groups stand or fall whole: the group's record names its entries, and exactly these are posted with it.
  `create function check_groups(p_head firm_head, p_docs jsonb[]) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    select jsonb_build_object('groupId', coalesce(told.id, given.id), 'told', told.ids, 'given', given.ids) into v_wrong
      from (select doc ->> 'groupId' as id, jsonb_agg(doc ->> 'id' order by n) as ids,
          array_agg(distinct doc ->> 'recordedAt') as recorded_at
        from unnest(p_docs) with ordinality u(doc, n) where doc ->> 'type' = 'entry' group by 1) given
      full join (select doc ->> 'id' as id, doc -> 'entryIds' as ids, array[doc ->> 'recordedAt'] as recorded_at
        from unnest(p_docs) u(doc) where doc ->> 'type' = 'group' and doc -> 'entryIds' <> '[]') told
        on told.id = given.id
      where told.ids is distinct from given.ids or told.recorded_at <> given.recorded_at limit 1;
    if found then perform refuse('TW004', 'group_whole', v_wrong); end if;

    select jsonb_build_object('groupId', e.group_id, 'entryId', e.id) into v_wrong
      from entry e
      where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
        and (e.unit_id is null or e.unit_id not in (
          case when e.from_place = 'unit' then e.from_id else e.to_id end,
          case when e.to_place = 'unit' then e.to_id else e.from_id end))
        and 'unit' in (e.from_place, e.to_place) limit 1;
    if found then perform refuse('TW002', 'record_form', v_wrong); end if;

    if exists (select from unnest(p_docs) d(doc)
        where doc ->> 'reversesGroupId' is not null or doc ->> 'reversesEntryId' is not null) then
      -- A reversal mirrors what it reverses: every entered mass of the group, the other way round, at the same time.
      select jsonb_build_object('groupId', e.group_id, 'entryId', e.id, 'reversesEntryId', e.reverses_entry_id) into v_wrong
        from (select x.* from entry x where x.firm_id = p_head.firm_id and x.sequence > p_head.sequence offset 0) e
        cross join lateral (select x.reverses_group_id from entry_group x
          where x.firm_id = e.firm_id and x.id = e.group_id offset 0) g
        left join lateral (select x.* from entry x
          where x.firm_id = e.firm_id and x.id = e.reverses_entry_id offset 0) o on true
        where e.reverses_entry_id is not null
          and (o.id is null or e.refrigerant <> o.refrigerant or e.mass_micrograms <> o.mass_micrograms
            or e.occurred_at <> o.occurred_at
            or (e.from_place, e.to_place) is distinct from (o.to_place, o.from_place)
            or e.from_id is distinct from o.to_id or e.to_id is distinct from o.from_id
            or e.from_as is distinct from o.to_as or e.to_as is distinct from o.from_as
            or (o.group_id is distinct from g.reverses_group_id and not e.added_by_server)) limit 1;
      if found then perform refuse('TW012', 'reversal_mirrors', v_wrong); end if;
      select jsonb_build_object('groupId', g.id, 'entryId', o.id) into v_wrong
        from (select x.* from entry_group x where x.firm_id = p_head.firm_id and x.sequence > p_head.sequence offset 0) g
        cross join lateral (select x.id from entry x
          where x.firm_id = g.firm_id and x.group_id = g.reverses_group_id and not x.added_by_server offset 0) o
        where g.reverses_group_id is not null
          and not exists (select from entry x
            where x.firm_id = g.firm_id and x.reverses_entry_id = o.id and x.group_id = g.id offset 0) limit 1;
      if found then perform refuse('TW012', 'reversal_mirrors', v_wrong); end if;

    end if;

    if exists (select from unnest(p_docs) d(doc) where doc ->> 'closesGroupId' is not null) then
      -- A weigh-in is closed once; if what closed it was reversed, it may be closed again.
      select jsonb_build_object('groupId', g.id, 'closesGroupId', g.closes_group_id) into v_wrong
        from (select x.* from entry_group x where x.firm_id = p_head.firm_id and x.sequence > p_head.sequence offset 0) g
        cross join lateral (select x.id, x.open_weigh_in from entry_group x
          where x.firm_id = g.firm_id and x.id = g.closes_group_id offset 0) w
        where g.closes_group_id is not null
          and (not w.open_weigh_in
            or exists (select from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = w.id offset 0)
            or exists (select from entry_group c
              where c.firm_id = g.firm_id and c.closes_group_id = w.id and c.id <> g.id
                and not exists (select from entry_group r
                  where r.firm_id = c.firm_id and r.reverses_group_id = c.id offset 0) offset 0))
        limit 1;
      if found then perform refuse('TW013', 'weigh_in_open', v_wrong); end if;
    end if;
  end $$`,

  // The month in which it occurred (firm's zone) or, where that is closed, the first open one, marked late.
  `create function check_months(p_head firm_head) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
    v_zone text := (select f.time_zone from firm f where f.id = p_head.firm_id);
    v_open text := coalesce(p_head.first_open_month, '');
  begin
    select jsonb_build_object('entryId', e.id, 'bookingMonth', e.booking_month, 'late', e.late,
        'month', to_char(e.occurred_at at time zone v_zone, 'YYYY-MM'), 'firstOpenMonth', p_head.first_open_month)
      into v_wrong
      from entry e
      where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
        and (e.booking_month <> greatest(to_char(e.occurred_at at time zone v_zone, 'YYYY-MM'), v_open)
          or e.late <> (to_char(e.occurred_at at time zone v_zone, 'YYYY-MM') < v_open))
      limit 1;
    if found then perform refuse('TW009', 'booking_month', v_wrong); end if;
  end $$`,

  `create function check_places(p_head firm_head, p_changes balance_change[]) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    select jsonb_build_object('place', p.place, 'id', p.place_id) into v_wrong
      from (select distinct c.place, c.place_id from unnest(p_changes) c where c.place_id is not null) p
      where not case p.place
        when 'cylinder' then exists (select from cylinder x where x.firm_id = p_head.firm_id and x.id = p.place_id)
        when 'unit' then exists (select from unit x where x.firm_id = p_head.firm_id and x.id = p.place_id)
        when 'customer' then exists (select from customer x where x.firm_id = p_head.firm_id and x.id = p.place_id)
        else exists (select from party x where x.firm_id = p_head.firm_id and x.id = p.place_id and x.kind = p.place)
      end limit 1;
    if found then perform refuse('TW005', 'place_registered', v_wrong); end if;
  end $$`,

  `create function check_cylinder_floor(p_changes balance_change[]) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    select jsonb_build_object('place', c.place, 'id', c.place_id, 'refrigerant', c.refrigerant,
        'bookMicrograms', c.before_micrograms::text, 'changeMicrograms', c.change_micrograms::text) into v_wrong
      from unnest(p_changes) c
      where c.place = 'cylinder' and c.before_micrograms + c.change_micrograms < 0 limit 1;
    if found then perform refuse('TW006', 'cylinder_not_below_zero', v_wrong); end if;
  end $$`,

  // Asked for, not refused for good: a second refrigerant, and contents past the limit, need their group's reason.
  // What corrects or reverses an earlier group is not what put it there, so it is not asked.
  `create function group_without_reason(p_head firm_head, p_cylinder uuid, p_refrigerant text) returns uuid
    language sql stable as $$
    select e.group_id from entry e
      cross join lateral (select x.reason from entry_group x
        where x.firm_id = e.firm_id and x.id = e.group_id offset 0) g
      where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence and e.to_id = p_cylinder
        and (p_refrigerant is null or e.refrigerant = p_refrigerant)
        and e.corrects_group_id is null and e.reverses_entry_id is null and coalesce(trim(g.reason), '') = ''
      order by e.sequence limit 1
  $$`,

  `create function check_cylinder_contents(p_head firm_head, p_changes balance_change[]) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    if not exists (select from unnest(p_changes) c where c.place = 'cylinder' and c.change_micrograms > 0) then return; end if;

    select jsonb_build_object('place', 'cylinder', 'id', m.place_id, 'refrigerant', m.refrigerant, 'groupId', m.group_id)
      into v_wrong
      from (
        select c.place_id, c.refrigerant, group_without_reason(p_head, c.place_id, c.refrigerant) as group_id
          from unnest(p_changes) c
          where c.place = 'cylinder' and c.before_micrograms <= 0 and c.before_micrograms + c.change_micrograms > 0
            and exists (select from balance b
              where b.firm_id = p_head.firm_id and b.place_key = c.place_key and b.refrigerant <> c.refrigerant
                and b.mass_micrograms > 0 and not came_first(p_head, p_changes, c, b.refrigerant) offset 0) offset 0
      ) m where m.group_id is not null limit 1;
    if found then perform refuse('TW010', 'second_refrigerant_reason', v_wrong); end if;

    select jsonb_build_object('place', 'cylinder', 'id', p.place_id, 'groupId', p.group_id,
        'bookMicrograms', p.content::text, 'limitMicrograms', p.limit_micrograms::text) into v_wrong
      from (
        select r.place_id, s.content, y.limit_micrograms, group_without_reason(p_head, r.place_id, null) as group_id
          from (select c.place_id, c.place_key from unnest(p_changes) c where c.place = 'cylinder'
            group by c.place_id, c.place_key having sum(c.change_micrograms) > 0) r
          cross join lateral (select x.limit_micrograms from cylinder x
            where x.firm_id = p_head.firm_id and x.id = r.place_id offset 0) y
          cross join lateral (select sum(b.mass_micrograms) as content from balance b
            where b.firm_id = p_head.firm_id and b.place_key = r.place_key) s
          where s.content > y.limit_micrograms offset 0
      ) p where p.group_id is not null limit 1;
    if found then perform refuse('TW011', 'past_limit_reason', v_wrong); end if;
  end $$`,

  // A book becomes known by a factory, opening or settling entry or statement, and unknown again only by a reversal or
  // another answer.
  `create function check_known(p_head firm_head, p_derived jsonb) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
    v_withdraws boolean := exists (select from
      (select x.* from entry_group x where x.firm_id = p_head.firm_id and x.sequence > p_head.sequence offset 0) g
      where (g.reverses_group_id is not null or g.answers_group_id is not null));
  begin
    select jsonb_build_object('place', d.place, 'id', d.id) into v_wrong
      from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid)
      where not case d.place
        when 'unit' then exists (select from unit u where u.firm_id = p_head.firm_id and u.id = d.id)
        when 'cylinder' then exists (select from cylinder y where y.firm_id = p_head.firm_id and y.id = d.id)
        else false end limit 1;
    if found then perform refuse('TW005', 'place_registered', v_wrong); end if;

    select jsonb_build_object('place', 'unit', 'id', d.id) into v_wrong
      from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid, known boolean)
      where d.place = 'unit' and not d.known and not v_withdraws and unit_is_known(p_head.firm_id, d.id) limit 1;
    if found then perform refuse('TW008', 'book_stays_known', v_wrong); end if;

    select jsonb_build_object('place', 'unit', 'id', d.id) into v_wrong
      from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid, known boolean)
      where d.place = 'unit' and d.known and not case
        when unit_is_known(p_head.firm_id, d.id) then true
        when exists (select from statement t where t.firm_id = p_head.firm_id and t.unit_id = d.id
          and t.condition in ('empty', 'full')) then true
        else exists (select from entry e where e.firm_id = p_head.firm_id and e.to_id = d.id
          and e.from_place in ('factory', 'opening')) end limit 1;
    if found then perform refuse('TW016', 'book_known_by_something', v_wrong); end if;
  end $$`,

  `create function check_units(p_head firm_head, p_changes balance_change[], p_derived jsonb) returns void
    language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    if not exists (select from unnest(p_changes) c where c.place = 'unit') and not p_derived ? 'placeStates' then return; end if;

    -- What came from the factory or as opening makes a book known: else a unit could be kept out of the floor below.
    select jsonb_build_object('place', 'unit', 'id', e.to_id) into v_wrong
      from (select x.* from entry x where x.firm_id = p_head.firm_id and x.sequence > p_head.sequence offset 0) e
      where e.to_place = 'unit' and e.from_place in ('factory', 'opening') and e.reverses_entry_id is null
        and not exists (select from entry r where r.firm_id = e.firm_id and r.reverses_entry_id = e.id offset 0)
        and not unit_is_known(e.firm_id, e.to_id) limit 1;
    if found then perform refuse('TW016', 'book_known_by_something', v_wrong); end if;

    select jsonb_build_object('place', 'unit', 'id', u.id, 'refrigerant', b.refrigerant,
        'bookMicrograms', b.mass_micrograms::text) into v_wrong
      from (
        select c.place_id as id from unnest(p_changes) c where c.place = 'unit'
        union select d.id from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid) where d.place = 'unit'
      ) u
      cross join lateral (select x.refrigerant, x.mass_micrograms from balance x
        where x.firm_id = p_head.firm_id and x.place_key = 'unit:' || u.id offset 0) b
      where b.mass_micrograms < 0 and unit_is_known(p_head.firm_id, u.id) limit 1;
    if found then perform refuse('TW007', 'unit_not_below_zero', v_wrong); end if;
  end $$`,
];

/** What the checks ask for again and again. In plpgsql where it is asked often: it keeps plans, sql functions do not. */
export const QUESTIONS = `
  create function unit_is_known(p_firm uuid, p_unit uuid) returns boolean language plpgsql stable as $$
  begin
    return exists (select from place_state s
      where s.firm_id = p_firm and s.place = 'unit' and s.place_id = p_unit and s.known);
  end $$;

  -- Of several refrigerants that came into an empty cylinder in one call, the first needs no reason.
  create function came_first(p_head firm_head, p_changes balance_change[], p_change balance_change, p_other text)
    returns boolean language sql stable as $$
    select not exists (select from unnest(p_changes) c
        where c.place_key = p_change.place_key and c.refrigerant <> p_change.refrigerant and c.before_micrograms > 0)
      and not exists (select from balance b
        where b.firm_id = p_head.firm_id and b.place_key = p_change.place_key and b.mass_micrograms > 0
          and b.refrigerant <> p_change.refrigerant
          and not exists (select from unnest(p_changes) c where c.place_key = b.place_key and c.refrigerant = b.refrigerant))
      and (select min(e.sequence) from entry e where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
          and e.to_id = p_change.place_id and e.refrigerant = p_change.refrigerant)
        < (select min(e.sequence) from entry e where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
          and e.to_id = p_change.place_id and e.refrigerant = p_other)
  $$;
`;
