import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { type LoaderFunctionArgs, useLoaderData, useNavigate } from 'react-router-dom';
import { updateUnitRequest } from '../../../shared/unit-register/unit.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { Problem } from '../../api/http.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries, useUpdateUnit } from '../../api/units.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { layOver, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { FormPart } from './form-part.tsx';
import { ApplianceFields, NameFields, NameplateFields } from './plate-fields.tsx';
import { changedUnitRequest, PLATE_PLACES, type PlateValues, plateOf, serialPlaces } from './unit-values.ts';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  return queryClient.fetchQuery(unitQueries.one(String(params.unitId)));
}

/** Changes of the register: each is recorded, before and after. Charge, refrigerant and line set have pages of their own. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const client = useQueryClient();
  const preferences = usePreferences();
  const loaded = useLoaderData<typeof loader>();
  const unit = useQuery({ ...unitQueries.one(loaded.id), initialData: loaded }).data;
  const [before, setBefore] = useState(() => plateOf(loaded, preferences));
  const update = useUpdateUnit({ id: unit.id, version: unit.version });
  const { form, submit, forget } = useRequestForm<PlateValues>({
    draftKey: `unit.edit.${unit.id}`,
    initial: () => before,
    toRequest: (values) => changedUnitRequest(values, before, preferences.locale) as never,
    check: (request) => schemaErrors(updateUnitRequest, request),
    places: (values) => [...PLATE_PLACES, ...(serialPlaces(values.serials) as [string, 'tag'][])],
  });
  const send = submit(
    async (request) => {
      if (Object.keys(request).length > 0) await update.mutateAsync(request);
      forget();
      await navigate(`/units/${unit.id}`, { replace: true });
    },
    async (error) => {
      // Changed by somebody else meanwhile: what was typed is laid over the newer version, on which the next press is made.
      if (error instanceof Problem && error.status === 412) {
        const newer = await client.fetchQuery({ ...unitQueries.one(unit.id), staleTime: 0 });
        layOver(form, before, plateOf(newer, preferences));
        setBefore(plateOf(newer, preferences));
        return [{ pointer: '', code: error.code, message: t('units.edit.stale') }];
      }
      return answerErrors(error);
    },
  );
  return (
    <Page
      title={t('units.edit.title', { tag: unit.tag })}
      lead={t('units.edit.lead')}
      next={
        <Button kind="act" wide type="submit" form="unit" busy={form.formState.isSubmitting}>
          {t('units.edit.act')}
        </Button>
      }
    >
      <div className="page-gutter max-w-2xl pt-4">
        <RequestForm id="unit" form={form} onSubmit={(event) => void send(event)}>
          <FormPart title={t('units.form.where')}>
            <NameFields />
            <ApplianceFields kindFixed />
          </FormPart>
          <FormPart title={t('units.form.nameplate')}>
            <NameplateFields />
          </FormPart>
        </RequestForm>
      </div>
    </Page>
  );
}
