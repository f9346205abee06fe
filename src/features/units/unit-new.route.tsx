import { useQuery } from '@tanstack/react-query';
import { useWatch } from 'react-hook-form';
import { Link, type LoaderFunctionArgs, useNavigate, useSearchParams } from 'react-router-dom';
import { createUnitRequest, FULL_CHARGE_METHODS } from '../../../shared/unit-register/unit.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { siteQueries } from '../../api/sites.ts';
import { useCreateUnit } from '../../api/units.ts';
import { deviceNow, instantOfLocal, toDayInput } from '../../lib/local-time.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { useRefrigerantNames } from '../../lib/refrigerant-names.ts';
import { Button } from '../../ui/button.tsx';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { FormChoice, FormQuantity, FormSelect, FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { FormPart } from './form-part.tsx';
import { ApplianceFields, NameFields, NameplateFields } from './plate-fields.tsx';
import { emptyUnit, type NewUnitValues, newUnitRequest, PLATE_PLACES, serialPlaces } from './unit-values.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  return null;
}

const startOf = (day: string) => instantOfLocal(`${day}T00:00`);

/** A unit into the register: who and where, the nameplate, the full charge and what is in it, or that nobody knows. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const preferences = usePreferences();
  const create = useCreateUnit();
  const { form, submit, forget } = useRequestForm<NewUnitValues>({
    draftKey: 'unit.new',
    initial: () => emptyUnit(preferences, { newId, today: toDayInput(deviceNow()), siteId: search.get('site') ?? '' }),
    toRequest: (values) => newUnitRequest(values, { locale: preferences.locale, instantOf: startOf }) as never,
    check: (request) => schemaErrors(createUnitRequest, request),
    places: (values) => [
      ['/siteId', 'siteId'],
      ['/refrigerant', 'refrigerant'],
      ['/refrigerantFrom', 'since'],
      ['/fullCharge/validFrom', 'since'],
      ['/fullCharge/method', 'method'],
      ['/fullCharge', 'fullCharge'],
      ['/initialCharge/at', 'since'],
      ['/initialCharge', 'initialMass'],
      ...PLATE_PLACES,
      ...(serialPlaces(values.serials) as [string, 'tag'][]),
    ],
  });
  const send = submit(async (request) => {
    const unit = await create.mutateAsync(request);
    forget();
    await navigate(`/units/${unit.id}`, { replace: true });
  }, answerErrors);
  return (
    <Page
      title={t('units.new.title')}
      lead={t('units.new.lead')}
      next={
        <Button kind="act" wide type="submit" form="unit" busy={form.formState.isSubmitting}>
          {t('units.new.act')}
        </Button>
      }
    >
      <div className="page-gutter max-w-2xl pt-4">
        <RequestForm id="unit" form={form} onSubmit={(event) => void send(event)}>
          <FormPart title={t('units.form.where')}>
            <SiteField />
            <NameFields />
            <ApplianceFields />
          </FormPart>
          <FormPart title={t('units.form.charge')}>
            <ChargeFields />
          </FormPart>
          <FormPart title={t('units.form.nameplate')}>
            <NameplateFields />
          </FormPart>
        </RequestForm>
      </div>
    </Page>
  );
}

function SiteField() {
  const t = useMessages();
  const sites = useQuery(siteQueries.choice());
  const mayWrite = usePermission('sites:write');
  if (sites.data?.length === 0) {
    return (
      <Notice title={t('units.form.noSite')}>
        {mayWrite ? <Link to="/sites/new?then=unit">{t('units.form.newSite')}</Link> : t('units.form.askForSite')}
      </Notice>
    );
  }
  return (
    <>
      <FormSelect
        name="siteId"
        label={t('units.site')}
        placeholder={t('units.form.choose')}
        choices={(sites.data ?? []).map(({ id, name, customerName }) => ({
          value: id,
          label: `${name}, ${customerName}`,
        }))}
      />
      {mayWrite ? (
        <Link to="/sites/new?then=unit" className="inline-flex min-h-12 items-center self-end">
          {t('units.form.newSite')}
        </Link>
      ) : null}
    </>
  );
}

/** Refrigerant, full charge with its method or not determined, and what is in it now or not known. */
function ChargeFields() {
  const t = useMessages();
  const names = useRefrigerantNames();
  const [known, initial] = useWatch({ name: ['fullChargeKnown', 'initial'] });
  return (
    <>
      <FormSelect
        name="refrigerant"
        label={t('units.refrigerant')}
        placeholder={t('units.form.choose')}
        choices={names.map(({ designation, safetyClass }) => ({
          value: designation,
          label: `${designation} (${safetyClass})`,
        }))}
      />
      <FormChoice
        name="fullChargeKnown"
        label={t('units.fullCharge.heading')}
        choices={[
          { value: 'yes', label: t('units.form.fullCharge.known') },
          { value: 'no', label: t('units.form.fullCharge.notDetermined') },
        ]}
      />
      {known === 'yes' ? (
        <>
          <FormQuantity
            kind="mass"
            name="fullCharge"
            label={t('units.form.fullCharge.mass')}
            units={['g', 'kg', 'lb', 'oz']}
            min={0.001}
            max={10_000_000}
            example="1.2 kg"
          />
          <FormSelect
            name="method"
            label={t('units.form.method')}
            choices={FULL_CHARGE_METHODS.map((value) => ({ value, label: t(`units.method.${value}`) }))}
          />
        </>
      ) : (
        <p className="text-[0.9375rem] text-ink-soft">{t('units.form.fullCharge.later')}</p>
      )}
      <FormChoice
        name="initial"
        label={t('units.form.initial')}
        choices={(['factory', 'opening', 'notKnown'] as const).map((value) => ({
          value,
          label: t(`units.form.initial.${value}`),
        }))}
      />
      <p className="text-[0.9375rem] text-ink-soft">{t(`units.form.initial.${initial as string}.detail`)}</p>
      {initial === 'notKnown' ? null : (
        <FormQuantity
          kind="mass"
          name="initialMass"
          label={t('units.form.initial.mass')}
          units={['g', 'kg', 'lb', 'oz']}
          min={0.001}
          max={10_000_000}
          example="1.2 kg"
        />
      )}
      <FormText type="date" name="since" label={t('units.form.since')} hint={t('units.form.sinceHint')} />
    </>
  );
}
