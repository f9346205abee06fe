import type { z } from 'zod';
import { jointList, refrigerantList, tubeList } from '../../shared/reference-lists/reference-lists.schema.ts';
import { type ApiRoutes, apiRoutes, ok } from '../http/api-routes.ts';
import type { Parts } from '../http/parts.ts';

/** Short lists to choose from. Public, as the calculations are. */
export function referenceListRoutes(parts: Parts): ApiRoutes {
  const { reference } = parts;
  const routes = apiRoutes(parts, 'Reference');
  const reads = { method: 'get', access: 'public' } as const;

  const refrigerants: z.input<typeof refrigerantList>['items'] = reference
    .refrigerantDesignations()
    .flatMap((designation) => reference.findRefrigerant(designation) ?? [])
    .map(({ designation, type, safetyClass, composition, glideClass }) => ({
      designation,
      type,
      safetyClass,
      blend: composition !== null,
      glideClass,
      hasSaturation: reference.findSaturationTable(designation) !== null,
    }));
  const tubes = reference.tubes.map(({ standard, nominal, temper, odMm, wallMm, idMm }) => {
    return { standard, nominal, temper, odMm, wallMm, idMm };
  });
  const joints = reference.joints.map((joint) => ({
    nominal: joint.nominal,
    odMm: joint.odMm,
    torqueMinNm: joint.torqueMinNm,
    torqueMaxNm: joint.torqueMaxNm,
    torqueMinFtLbf: joint.torqueMinFtLbf,
    torqueMaxFtLbf: joint.torqueMaxFtLbf,
    status: joint.status,
    source: joint.source,
  }));
  const version = (table: string) => reference.versions[table] ?? '';

  routes.add(
    { ...reads, path: '/reference/refrigerants', summary: 'Refrigerants', responses: { 200: refrigerantList } },
    () => ok({ items: refrigerants, version: version('refrigerants') }),
  );
  routes.add({ ...reads, path: '/reference/tubes', summary: 'Copper tubes', responses: { 200: tubeList } }, () =>
    ok({ items: tubes, version: version('tubes') }),
  );
  routes.add(
    {
      ...reads,
      path: '/reference/joints',
      summary: 'Flare joints, general table; the manual of the unit governs',
      responses: { 200: jointList },
    },
    () => ok({ items: joints, version: version('joints') }),
  );
  return routes;
}
