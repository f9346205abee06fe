/** The rules of the log, checked over all rows of one call; part of migration 1764547200004 and never edited again. */
export const CHECKS: readonly string[] = [
  // Groups stand or fall whole: the group's record names its entries, and exactly these are posted with it.
  `create function check_groups(p_head firm_head, p_docs jsonb[]) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    select jsonb_build_object('groupId', coalesce(told.id, d.doc ->> 'groupId'), 'told', told.ids, 'given', array_agg(d.doc ->> 'id' order by d.n))
      into v_wrong
      from (select doc, n from unnest(p_docs) with ordinality u(doc, n) where doc ->> 'type' = 'entry') d
      full join (select doc ->> 'id' as id, doc -> 'entryIds' as ids from unnest(p_docs) u(doc)
        where doc ->> 'type' = 'group' and doc -> 'entryIds' <> '[]') told on told.id = d.doc ->> 'groupId'
      group by told.id, told.ids, d.doc ->> 'groupId'
      having told.ids is distinct from jsonb_agg(d.doc ->> 'id' order by d.n) limit 1;
    if found then perform refuse('TW004', 'group_whole', v_wrong); end if;

    select jsonb_build_object('groupId', g.id, 'entryId', e.id) into v_wrong
      from entry_group g join entry e on e.firm_id = g.firm_id and e.group_id = g.id
      where g.firm_id = p_head.firm_id and g.sequence > p_head.sequence
        and (e.recorded_at <> g.recorded_at
          or ('unit' in (e.from_place, e.to_place) and (e.unit_id is null or e.unit_id not in (
            case when e.from_place = 'unit' then e.from_id else e.to_id end,
            case when e.to_place = 'unit' then e.to_id else e.from_id end))))
      limit 1;
    if found then perform refuse('TW002', 'record_form', v_wrong); end if;

    -- A reversal mirrors what it reverses: every entered mass of the group, the other way round, at the same time.
    select jsonb_build_object('groupId', e.group_id, 'entryId', e.id, 'reversesEntryId', e.reverses_entry_id) into v_wrong
      from entry e
      join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
      left join entry o on o.firm_id = e.firm_id and o.id = e.reverses_entry_id
      where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence and e.reverses_entry_id is not null
        and (o.id is null or e.refrigerant <> o.refrigerant or e.mass_micrograms <> o.mass_micrograms
          or e.occurred_at <> o.occurred_at
          or (e.from_place, e.to_place) is distinct from (o.to_place, o.from_place)
          or e.from_id is distinct from o.to_id or e.to_id is distinct from o.from_id
          or e.from_as is distinct from o.to_as or e.to_as is distinct from o.from_as
          or (o.group_id is distinct from g.reverses_group_id and not e.added_by_server)) limit 1;
    if found then perform refuse('TW012', 'reversal_mirrors', v_wrong); end if;
    select jsonb_build_object('groupId', g.id, 'entryId', o.id) into v_wrong
      from entry_group g
      join entry o on o.firm_id = g.firm_id and o.group_id = g.reverses_group_id and not o.added_by_server
      where g.firm_id = p_head.firm_id and g.sequence > p_head.sequence and g.reverses_group_id is not null
        and not exists (select from entry e
          where e.firm_id = g.firm_id and e.group_id = g.id and e.reverses_entry_id = o.id) limit 1;
    if found then perform refuse('TW012', 'reversal_mirrors', v_wrong); end if;

    -- A weigh-in is closed once; if what closed it was reversed, it may be closed again.
    select jsonb_build_object('groupId', g.id, 'closesGroupId', g.closes_group_id) into v_wrong
      from entry_group g
      join entry_group w on w.firm_id = g.firm_id and w.id = g.closes_group_id
      where g.firm_id = p_head.firm_id and g.sequence > p_head.sequence and g.closes_group_id is not null
        and (not w.open_weigh_in
          or exists (select from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = w.id)
          or exists (select from entry_group c
            where c.firm_id = g.firm_id and c.closes_group_id = w.id and c.id <> g.id
              and not exists (select from entry_group r where r.firm_id = g.firm_id and r.reverses_group_id = c.id)))
      limit 1;
    if found then perform refuse('TW013', 'weigh_in_open', v_wrong); end if;
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
  `create function check_cylinder_contents(p_head firm_head, p_changes balance_change[]) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    with arrived as (
      select c.place_id, c.refrigerant from unnest(p_changes) c
        where c.place = 'cylinder' and c.before_micrograms <= 0 and c.before_micrograms + c.change_micrograms > 0
    ), mixed as (
      select a.place_id, a.refrigerant from arrived a
        where exists (select from balance b
          where b.firm_id = p_head.firm_id and b.place_key = 'cylinder:' || a.place_id and b.refrigerant <> a.refrigerant
            and b.mass_micrograms > 0
            and (not exists (select from arrived other
                where other.place_id = a.place_id and other.refrigerant = b.refrigerant)
              -- of several that came into an empty cylinder in this call, the first needs no reason
              or (select min(e.sequence) from entry e where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
                  and e.to_id = a.place_id and e.refrigerant = b.refrigerant)
                < (select min(e.sequence) from entry e where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence
                  and e.to_id = a.place_id and e.refrigerant = a.refrigerant)))
    )
    select jsonb_build_object('place', 'cylinder', 'id', m.place_id, 'refrigerant', m.refrigerant, 'groupId', g.id)
      into v_wrong
      from mixed m
      join entry e on e.firm_id = p_head.firm_id and e.sequence > p_head.sequence and e.to_id = m.place_id
        and e.refrigerant = m.refrigerant and e.corrects_group_id is null and e.reverses_entry_id is null
      join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
      where coalesce(trim(g.reason), '') = '' limit 1;
    if found then perform refuse('TW010', 'second_refrigerant_reason', v_wrong); end if;

    with risen as (
      select c.place_id from unnest(p_changes) c where c.place = 'cylinder'
        group by c.place_id having sum(c.change_micrograms) > 0
    ), past as (
      select y.id, y.limit_micrograms, s.content from risen r
        join cylinder y on y.firm_id = p_head.firm_id and y.id = r.place_id and y.limit_micrograms is not null
        cross join lateral (select sum(b.mass_micrograms) as content from balance b
          where b.firm_id = p_head.firm_id and b.place = 'cylinder' and b.place_id = y.id) s
        where s.content > y.limit_micrograms
    )
    select jsonb_build_object('place', 'cylinder', 'id', p.id, 'groupId', g.id,
        'bookMicrograms', p.content::text, 'limitMicrograms', p.limit_micrograms::text) into v_wrong
      from past p
      join entry e on e.firm_id = p_head.firm_id and e.sequence > p_head.sequence and e.to_id = p.id
        and e.corrects_group_id is null and e.reverses_entry_id is null
      join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
      where coalesce(trim(g.reason), '') = '' limit 1;
    if found then perform refuse('TW011', 'past_limit_reason', v_wrong); end if;
  end $$`,

  // A book becomes known by a factory, opening or settling entry or statement, and unknown again only by a reversal or another answer.
  `create function check_known(p_head firm_head, p_derived jsonb) returns void language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    select jsonb_build_object('place', 'unit', 'id', d.id) into v_wrong
      from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid, known boolean)
      join place_state s on s.firm_id = p_head.firm_id and s.place = 'unit' and s.place_id = d.id
      where d.place = 'unit' and s.known and not d.known
        and not exists (select from entry_group g where g.firm_id = p_head.firm_id and g.sequence > p_head.sequence
          and (g.reverses_group_id is not null or g.answers_group_id is not null)) limit 1;
    if found then perform refuse('TW008', 'book_stays_known', v_wrong); end if;

    select jsonb_build_object('place', 'unit', 'id', d.id) into v_wrong
      from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid, known boolean)
      where d.place = 'unit' and d.known
        and not exists (select from place_state s
          where s.firm_id = p_head.firm_id and s.place = 'unit' and s.place_id = d.id and s.known)
        and not exists (select from entry e where e.firm_id = p_head.firm_id and e.to_id = d.id
          and e.from_place in ('factory', 'opening'))
        and not exists (select from statement t where t.firm_id = p_head.firm_id and t.unit_id = d.id
          and t.condition in ('empty', 'full')) limit 1;
    if found then perform refuse('TW016', 'book_known_by_something', v_wrong); end if;

    select jsonb_build_object('place', d.place, 'id', d.id) into v_wrong
      from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid)
      where not case d.place
        when 'unit' then exists (select from unit u where u.firm_id = p_head.firm_id and u.id = d.id)
        when 'cylinder' then exists (select from cylinder y where y.firm_id = p_head.firm_id and y.id = d.id)
        else false end limit 1;
    if found then perform refuse('TW005', 'place_registered', v_wrong); end if;
  end $$`,

  `create function check_units(p_head firm_head, p_changes balance_change[], p_derived jsonb) returns void
    language plpgsql as $$
  declare
    v_wrong jsonb;
  begin
    -- What came from the factory or as opening makes a book known: else a unit could be kept out of the floor below.
    select jsonb_build_object('place', 'unit', 'id', e.to_id) into v_wrong
      from entry e
      where e.firm_id = p_head.firm_id and e.sequence > p_head.sequence and e.to_place = 'unit'
        and e.from_place in ('factory', 'opening')
        and e.reverses_entry_id is null
        and not exists (select from entry r where r.firm_id = e.firm_id and r.reverses_entry_id = e.id)
        and not exists (select from place_state s
          where s.firm_id = e.firm_id and s.place = 'unit' and s.place_id = e.to_id and s.known) limit 1;
    if found then perform refuse('TW016', 'book_known_by_something', v_wrong); end if;

    select jsonb_build_object('place', 'unit', 'id', u.id, 'refrigerant', b.refrigerant,
        'bookMicrograms', b.mass_micrograms::text) into v_wrong
      from (
        select c.place_id as id from unnest(p_changes) c where c.place = 'unit'
        union select d.id from jsonb_to_recordset(p_derived -> 'placeStates') d(place text, id uuid) where d.place = 'unit'
      ) u
      join place_state s on s.firm_id = p_head.firm_id and s.place = 'unit' and s.place_id = u.id and s.known
      join balance b on b.firm_id = p_head.firm_id and b.place = 'unit' and b.place_id = u.id
      where b.mass_micrograms < 0 limit 1;
    if found then perform refuse('TW007', 'unit_not_below_zero', v_wrong); end if;
  end $$`,
];
