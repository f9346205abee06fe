import { type LoaderFunctionArgs, useLoaderData, useNavigate, useSearchParams } from 'react-router-dom';
import { createCustomerRequest } from '../../../shared/customers/customers.schema.ts';
import { createSiteRequest } from '../../../shared/sites/sites.schema.ts';
import { useCreateCustomer } from '../../api/customers.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { requireSession } from '../../api/session.ts';
import { useCreateSite } from '../../api/sites.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { CustomerFields, PlaceFields } from './site-fields.tsx';
import { customerRequest, emptySite, SITE_PLACES, type SiteValues, siteRequest } from './site-values.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  const [session] = await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  return session;
}

interface Both {
  customer: ReturnType<typeof customerRequest>;
  site: ReturnType<typeof siteRequest>['request'];
}

/** A site with its customer. `then=unit` goes on to registering a unit there. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const session = useLoaderData<typeof loader>();
  const preferences = usePreferences();
  const createCustomer = useCreateCustomer();
  const createSite = useCreateSite();
  const { form, submit, forget } = useRequestForm<SiteValues>({
    draftKey: 'site.new',
    initial: () => emptySite(preferences, { newId, firm: session.firm, customerId: search.get('customer') ?? '' }),
    toRequest: (values) => {
      const { request, unreadable } = siteRequest(values, preferences.locale);
      return { request: { customer: customerRequest(values), site: request }, unreadable: unreadable as 'altitude'[] };
    },
    check: (request) => {
      const { customer, site } = request as Both;
      return [
        ...(customer
          ? schemaErrors(createCustomerRequest, customer).map((error) => ({
              ...error,
              pointer: `/customer${error.pointer}`,
            }))
          : []),
        ...schemaErrors(createSiteRequest, site),
      ];
    },
    places: () => SITE_PLACES,
  });
  const send = submit(async (request: Both) => {
    // Both ids are made when the form opens: after a lost answer the customer is only confirmed, not made twice.
    if (request.customer) await createCustomer.mutateAsync(request.customer);
    const site = await createSite.mutateAsync(request.site);
    forget();
    await navigate(search.get('then') === 'unit' ? `/units/new?site=${site.id}` : '/sites', { replace: true });
  }, answerErrors);
  return (
    <Page
      title={t('sites.new.title')}
      lead={t('sites.new.lead')}
      next={
        <Button kind="act" wide type="submit" form="site" busy={form.formState.isSubmitting}>
          {t('sites.new.act')}
        </Button>
      }
    >
      <div className="page-gutter max-w-2xl pt-4">
        <RequestForm id="site" form={form} onSubmit={(event) => void send(event)}>
          <CustomerFields />
          <PlaceFields />
        </RequestForm>
      </div>
    </Page>
  );
}
