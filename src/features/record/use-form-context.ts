import { useQueries, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { cylinderQueries } from '../../api/cylinders.ts';
import { entryQueries } from '../../api/entries.ts';
import { useSession } from '../../api/session.ts';
import { siteQueries } from '../../api/sites.ts';
import { toolQueries } from '../../api/tools.ts';
import { unitQueries } from '../../api/units.ts';
import { deviceNow, instantOfLocal, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import type { Answers, FormContext } from './answers.ts';

/** What the forms know besides what was typed, read from the server as it is chosen. */
export function useFormContext(answers: Answers): FormContext {
  const t = useMessages();
  const { locale } = usePreferences();
  const { unitId, machineId, aboutGroupId } = answers;
  const unit = useQuery({ ...unitQueries.one(unitId), enabled: unitId !== '' }).data ?? null;
  const siteId = unit?.siteId ?? '';
  const site = useQuery({ ...siteQueries.one(siteId), enabled: siteId !== '' }).data;
  const cylinders = useQuery(cylinderQueries.choice()).data?.items;
  // A choice lists the first of them; one that was chosen elsewhere is read by itself.
  const chosen = useQueries({
    queries: answers.rows
      .map(({ cylinderId }) => cylinderId)
      .filter((id) => id !== '' && cylinders !== undefined && !cylinders.some((cylinder) => cylinder.id === id))
      .map((id) => cylinderQueries.one(id)),
    combine: (results) => results.flatMap(({ data }) => (data ? [data] : [])),
  });
  const machines = useQuery(toolQueries.choice('recoveryMachine')).data;
  const group = useQuery({ ...entryQueries.group(aboutGroupId), enabled: aboutGroupId !== '' }).data;
  const firmJurisdiction = useSession()?.firm.jurisdiction ?? null;
  return useMemo(() => {
    const byId = new Map([...(cylinders ?? []), ...chosen].map((cylinder) => [cylinder.id, cylinder]));
    const bought = group?.entries.find(({ from, to }) => from.place === 'supplier' && to.place === 'cylinder');
    return {
      locale,
      unit,
      jurisdiction: site?.jurisdiction ?? null,
      firmJurisdiction,
      today: toDayInput(deviceNow()),
      cylinder: (id) => byId.get(id),
      machineMadeOn: machines?.find(({ id }) => id === machineId)?.madeOn ?? null,
      purchase:
        group && bought?.from.id
          ? {
              groupId: group.id,
              occurredAt: bought.occurredAt,
              supplierId: bought.from.id,
              refrigerant: bought.refrigerant,
              massG: bought.massG,
            }
          : null,
      instant: (local) => instantOfLocal(local) ?? '',
      say: t,
    };
  }, [locale, unit, site, cylinders, chosen, machines, machineId, group, t, firmJurisdiction]);
}

/** Whether everything that was chosen has been read: before that a form would build a request with holes. */
export const isReady = ({ unitId, rows, aboutGroupId }: Answers, context: FormContext): boolean =>
  (unitId === '' || (context.unit !== null && context.jurisdiction !== null)) &&
  rows.every(({ cylinderId }) => cylinderId === '' || context.cylinder(cylinderId) !== undefined) &&
  (aboutGroupId === '' || context.purchase !== null);
