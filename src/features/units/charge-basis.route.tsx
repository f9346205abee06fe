import { type LoaderFunctionArgs, useLoaderData, useNavigate } from 'react-router-dom';
import { addChargeBasisRequest } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import { chargeSheetQueries, useAddChargeBasis } from '../../api/charge-sheets.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { deviceNow, instantOfLocal, toLocalInput } from '../../lib/local-time.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { LimitFields, ManualRuleFields, RateFields } from './basis-fields.tsx';
import { type BasisValues, basisPlaces, basisRequest, basisValues } from './basis-values.ts';
import { FormPart } from './form-part.tsx';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  const unitId = String(params.unitId);
  const [unit, bases] = await Promise.all([
    queryClient.ensureQueryData(unitQueries.one(unitId)),
    queryClient.ensureQueryData(chargeSheetQueries.bases(unitId)),
  ]);
  return { unit, stored: bases.items[0] ?? null };
}

/** What the installation manual says about charging this model, with document and page. Earlier ones stay. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const preferences = usePreferences();
  const { unit, stored } = useLoaderData<typeof loader>();
  const add = useAddChargeBasis(unit.id);
  const { form, submit, forget } = useRequestForm<BasisValues>({
    draftKey: `unit.charge-basis.${unit.id}.${stored?.id ?? ''}`,
    initial: () => basisValues(stored, preferences, { id: newId(), validFrom: toLocalInput(deviceNow()) }),
    toRequest: (values) =>
      basisRequest(values, {
        locale: preferences.locale,
        refrigerant: unit.refrigerant,
        instantOf: instantOfLocal,
        notNumber: (typed) => t('units.form.notNumber', { typed }),
      }) as never,
    check: (request) => schemaErrors(addChargeBasisRequest, request),
    places: (values) => basisPlaces(values) as [string, 'note'][],
  });
  const send = submit(async (request) => {
    await add.mutateAsync(request);
    forget();
    await navigate(`/units/${unit.id}`, { replace: true });
  }, answerErrors);
  return (
    <Page
      title={t('units.basis.title', { tag: unit.tag })}
      lead={t('units.basis.lead', { refrigerant: unit.refrigerant })}
      next={
        <Button kind="act" wide type="submit" form="charge-basis" busy={form.formState.isSubmitting}>
          {t('units.basis.act')}
        </Button>
      }
    >
      <div className="page-gutter max-w-2xl pt-4">
        <RequestForm id="charge-basis" form={form} onSubmit={(event) => void send(event)}>
          <FormPart title={t('units.basis.manualHeading')}>
            <FormText name="document" label={t('units.basis.document')} maxLength={160} autoComplete="off" />
            <FormText
              name="page"
              label={t('units.basis.pageField')}
              hint={t('units.form.optional')}
              maxLength={20}
              autoComplete="off"
            />
          </FormPart>
          <RateFields />
          <LimitFields />
          <ManualRuleFields />
          <FormPart title={t('units.form.more')}>
            <FormText layout="stack" type="datetime-local" name="validFrom" label={t('units.since')} />
            <FormText name="note" label={t('units.note')} hint={t('units.form.optional')} maxLength={500} />
          </FormPart>
        </RequestForm>
      </div>
    </Page>
  );
}
