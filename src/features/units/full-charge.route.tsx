import { type LoaderFunctionArgs, useLoaderData, useNavigate } from 'react-router-dom';
import { addFullChargeRequest, FULL_CHARGE_METHODS } from '../../../shared/unit-register/unit.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries, useAddFullCharge } from '../../api/units.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, instantOfLocal, toLocalInput } from '../../lib/local-time.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { emptyQuantity, type QuantityDraft } from '../../ui/quantity-draft.ts';
import { FormQuantity, FormSelect, FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { given, massUnitOf, reader } from './unit-values.ts';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  return queryClient.ensureQueryData(unitQueries.one(String(params.unitId)));
}

interface Values {
  id: string;
  mass: QuantityDraft<'mass'>;
  method: string;
  validFrom: string;
  reason: string;
}

/** A full charge that was determined, with the law's method, its date and why. The unit's entries are judged again by it. */
export function Component() {
  const t = useMessages();
  const format = useFormat();
  const navigate = useNavigate();
  const preferences = usePreferences();
  const unit = useLoaderData<typeof loader>();
  const add = useAddFullCharge(unit.id);
  const { form, submit, forget } = useRequestForm<Values>({
    draftKey: `unit.full-charge.${unit.id}`,
    initial: () => ({
      id: newId(),
      mass: emptyQuantity(massUnitOf(preferences)),
      method: 'manufacturer',
      validFrom: toLocalInput(deviceNow()),
      reason: '',
    }),
    toRequest: (values) => {
      const { read, unreadable } = reader<'mass'>(preferences.locale);
      const mass = read('mass', values.mass, 'mass')?.typed;
      const validFrom = instantOfLocal(values.validFrom) ?? '';
      return {
        request: { id: values.id, mass, method: values.method, validFrom, jobId: null, reason: given(values.reason) },
        unreadable,
      };
    },
    check: (request) => schemaErrors(addFullChargeRequest, request),
    places: () => [
      ['/mass', 'mass'],
      ['/method', 'method'],
      ['/validFrom', 'validFrom'],
      ['/reason', 'reason'],
    ],
  });
  const send = submit(async (request) => {
    await add.mutateAsync(request);
    forget();
    await navigate(`/units/${unit.id}`, { replace: true });
  }, answerErrors);
  return (
    <Page
      title={t('units.fullCharge.title', { tag: unit.tag })}
      lead={t('units.fullCharge.lead')}
      next={
        <Button kind="act" wide type="submit" form="full-charge" busy={form.formState.isSubmitting}>
          {t('units.fullCharge.act')}
        </Button>
      }
    >
      <div className="page-gutter flex max-w-2xl flex-col gap-4 pt-4">
        {unit.fullCharge ? (
          <Notice
            title={t('units.fullCharge.now', {
              mass: format.mass(unit.fullCharge.massG),
              date: format.longDateTime(unit.fullCharge.validFrom),
            })}
          />
        ) : null}
        <RequestForm id="full-charge" form={form} onSubmit={(event) => void send(event)}>
          <FormQuantity
            kind="mass"
            name="mass"
            label={t('units.form.fullCharge.mass')}
            units={['g', 'kg', 'lb', 'oz']}
            min={0.001}
            max={10_000_000}
            example="1.29 kg"
          />
          <FormSelect
            name="method"
            label={t('units.form.method')}
            choices={FULL_CHARGE_METHODS.map((value) => ({ value, label: t(`units.method.${value}`) }))}
          />
          <FormText layout="stack" type="datetime-local" name="validFrom" label={t('units.fullCharge.validFrom')} />
          <FormText
            name="reason"
            label={t('units.fullCharge.reason')}
            hint={t('units.fullCharge.reasonHint')}
            maxLength={500}
          />
        </RequestForm>
      </div>
    </Page>
  );
}
