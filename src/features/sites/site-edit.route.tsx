import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { type LoaderFunctionArgs, useLoaderData, useNavigate } from 'react-router-dom';
import { updateSiteRequest } from '../../../shared/sites/sites.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { Problem } from '../../api/http.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { siteQueries, useUpdateSite } from '../../api/sites.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { layOver, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { PlaceFields } from './site-fields.tsx';
import { SITE_PLACES, type SiteValues, siteRequest, siteValues } from './site-values.ts';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  return queryClient.fetchQuery(siteQueries.one(String(params.siteId)));
}

/** Changes of a site: only what was changed is sent, on the version that was seen. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const client = useQueryClient();
  const { locale, length } = usePreferences();
  const loaded = useLoaderData<typeof loader>();
  const site = useQuery({ ...siteQueries.one(loaded.id), initialData: loaded }).data;
  const [before, setBefore] = useState(() => siteValues(loaded, { locale, length }));
  const update = useUpdateSite({ id: site.id, version: site.version });
  const { form, submit, forget } = useRequestForm<SiteValues>({
    draftKey: `site.edit.${site.id}`,
    initial: () => before,
    toRequest: (values) => {
      const { request, unreadable } = siteRequest(values, locale);
      const then = siteRequest(before, locale).request;
      const changed = Object.entries(request).filter(
        ([name, value]) => JSON.stringify(value) !== JSON.stringify(then[name as keyof typeof then]),
      );
      return { request: Object.fromEntries(changed), unreadable: unreadable as 'altitude'[] };
    },
    check: (request) => schemaErrors(updateSiteRequest, request),
    places: () => SITE_PLACES,
  });
  const send = submit(
    async (request) => {
      if (Object.keys(request).length > 0) await update.mutateAsync(request);
      forget();
      await navigate('/sites', { replace: true });
    },
    async (error) => {
      if (error instanceof Problem && error.status === 412) {
        const newer = siteValues(await client.fetchQuery({ ...siteQueries.one(site.id), staleTime: 0 }), {
          locale,
          length,
        });
        layOver(form, before, newer);
        setBefore(newer);
        return [{ pointer: '', code: error.code, message: t('units.edit.stale') }];
      }
      return answerErrors(error);
    },
  );
  return (
    <Page
      title={t('sites.edit.title')}
      lead={`${site.name}, ${site.customerName}`}
      next={
        <Button kind="act" wide type="submit" form="site" busy={form.formState.isSubmitting}>
          {t('units.edit.act')}
        </Button>
      }
    >
      <div className="page-gutter max-w-2xl pt-4">
        <RequestForm id="site" form={form} onSubmit={(event) => void send(event)}>
          <PlaceFields />
        </RequestForm>
      </div>
    </Page>
  );
}
