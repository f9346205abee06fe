/**
 * SQL for the site where the unit of an entry or a group stood when it happened. The column says where it was believed to
 * stand when it was posted; a move that is told late says better. Looked up for units that have moved alone.
 *
 * @param alias of a row with unit_id, occurred_at and site_id
 */
export const siteThen = (alias: string): string =>
  siteAt(`${alias}.unit_id`, `${alias}.occurred_at`, `${alias}.site_id`);

/** @param otherwise where a unit that never moved stands */
export const siteAt = (unitId: string, at: string, otherwise: string): string =>
  `case when ${unitId} = any ((select moved_unit_ids())::uuid[])
    then site_of_unit_at(${unitId}, ${at}, ${otherwise}) else ${otherwise} end`;
