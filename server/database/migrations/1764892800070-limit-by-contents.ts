import { ForwardOnlyMigration } from './forward-only-migration.ts';

/**
 * The limit that a posting is held to follows what is in the cylinder, not what the cylinder is meant for: the stamped
 * one, else the published rule with the lowest density of what it holds.
 */
export class LimitByContents1764892800070 extends ForwardOnlyMigration {
  readonly name = 'LimitByContents1764892800070';
  readonly statements = [DENSITY, LIMIT, CHECK];
}

/** kg/m3 at 25 °C, as in `data/cylinder-filling.json`; a test compares the two. */
const DENSITY = `
  create function filling_density(p_refrigerant text) returns numeric language sql immutable as $$
  select case p_refrigerant
    when 'R-22' then 1190.65
    when 'R-32' then 961.01
    when 'R-134a' then 1206.71
    when 'R-404A' then 1044.03
    when 'R-407A' then 1145.11
    when 'R-407C' then 1137.53
    when 'R-407F' then 1116.93
    when 'R-410A' then 1058.9
    when 'R-422D' then 1143.52
    when 'R-438A' then 1144.7
    when 'R-448A' then 1097.46
    when 'R-449A' then 1097.36
    when 'R-450A' then 1179.74
    when 'R-452A' then 1123.51
    when 'R-452B' then 994.79
    when 'R-454A' then 1023.69
    when 'R-454B' then 986.23
    when 'R-454C' then 1045.03
    when 'R-455A' then 1032.46
    when 'R-466A' then 1284.02
    when 'R-507A' then 1047.88
    when 'R-513A' then 1134.3
    when 'R-123' then 1463.89
    when 'R-1233zd(E)' then 1262.93
    when 'R-1234yf' then 1091.74
    when 'R-1234ze(E)' then 1163.09
    when 'R-290' then 492.36
    when 'R-600a' then 550.65
    when 'R-717' then 602.96
    when 'R-744' then 710.5
    when 'R-1270' then 506.28
  end $$;
  revoke all on function filling_density(text) from public;
  grant execute on function filling_density(text) to tarewright_app, tarewright_jobs;
`;

/**
 * 0.8 x water capacity x density, to the milligram as the server says it. What is not known counts as what the cylinder
 * is meant for. In plpgsql, which keeps its plans: every posting into a cylinder asks.
 */
const LIMIT = `
  create function cylinder_limit(p_cylinder cylinder) returns bigint language plpgsql stable as $$
  declare
    v_meant numeric := filling_density(p_cylinder.refrigerant);
    v_known boolean;
    v_lightest numeric;
  begin
    if p_cylinder.stamped_limit_micrograms is not null then return p_cylinder.stamped_limit_micrograms; end if;
    if p_cylinder.kind = 'nonRefillable' or p_cylinder.water_capacity_micrograms is null then
      return p_cylinder.limit_micrograms;
    end if;
    select bool_and(h.density is not null), min(h.density) into v_known, v_lightest
      from (select coalesce(filling_density(b.refrigerant), v_meant) as density
        from balance b where b.firm_id = p_cylinder.firm_id and b.place_key = 'cylinder:' || p_cylinder.id
          and b.mass_micrograms > 0 offset 0) h;
    if not v_known then return null; end if;
    return (round(0.8 * p_cylinder.water_capacity_micrograms * coalesce(v_lightest, v_meant) / 1000000) * 1000)::bigint;
  end $$;
  revoke all on function cylinder_limit(cylinder) from public;
  grant execute on function cylinder_limit(cylinder) to tarewright_app, tarewright_jobs;
`;

/** A milligram more where it is computed: this is the last line, and must never refuse what the server let pass. */
const CHECK = `
  create or replace function check_cylinder_contents(p_head firm_head, p_changes balance_change[]) returns void language plpgsql as $$
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
          cross join lateral (select cylinder_limit(x) + case when x.stamped_limit_micrograms is null
              and x.water_capacity_micrograms is not null then 1000 else 0 end as limit_micrograms from cylinder x
            where x.firm_id = p_head.firm_id and x.id = r.place_id offset 0) y
          cross join lateral (select sum(b.mass_micrograms) as content from balance b
            where b.firm_id = p_head.firm_id and b.place_key = r.place_key) s
          where s.content > y.limit_micrograms offset 0
      ) p where p.group_id is not null limit 1;
    if found then perform refuse('TW011', 'past_limit_reason', v_wrong); end if;
  end $$;
`;
