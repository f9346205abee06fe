import { useQuery } from '@tanstack/react-query';
import { useController, useWatch } from 'react-hook-form';
import { JURISDICTIONS } from '../../../shared/session/session.schema.ts';
import { customerQueries } from '../../api/customers.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { blank, Field } from '../../ui/field.tsx';
import { FormQuantity, FormSelect, FormText, useFieldError } from '../../ui/request-form.tsx';
import { NEW_CUSTOMER } from './site-values.ts';

/** Whose site it is: somebody on record, or a new customer. */
export function CustomerFields() {
  const t = useMessages();
  const customers = useQuery(customerQueries.choice());
  const customerId = useWatch({ name: 'customerId' });
  return (
    <>
      <FormSelect
        name="customerId"
        label={t('units.customer')}
        placeholder={t('units.form.choose')}
        choices={[
          { value: NEW_CUSTOMER, label: t('sites.newCustomer') },
          ...(customers.data ?? []).map(({ id, name }) => ({ value: id, label: name })),
        ]}
      />
      {customerId === NEW_CUSTOMER ? (
        <>
          <FormText name="customerName" label={t('sites.customerName')} maxLength={160} autoComplete="off" />
          <FormText
            type="email"
            name="customerEmail"
            label={t('sites.customerEmail')}
            hint={t('units.form.optional')}
            maxLength={254}
            autoComplete="off"
          />
          <FormText
            type="tel"
            name="customerPhone"
            label={t('sites.customerPhone')}
            hint={t('units.form.optional')}
            maxLength={40}
            autoComplete="off"
          />
        </>
      ) : null}
    </>
  );
}

/** Where it is, and what follows from it: the day, the air pressure, the rules. */
export function PlaceFields() {
  const t = useMessages();
  const { length } = usePreferences();
  const zone = String(useWatch({ name: 'timeZone' }) ?? '');
  // What the browser lists leaves out some that a firm may have: UTC, say.
  const listed = Intl.supportedValuesOf('timeZone');
  const zones = zone === '' || listed.includes(zone) ? listed : [zone, ...listed];
  return (
    <>
      <FormText name="name" label={t('sites.name')} maxLength={160} autoComplete="off" />
      <Address />
      <FormSelect
        name="timeZone"
        label={t('sites.timeZone')}
        choices={zones.map((value) => ({ value, label: value.replaceAll('_', ' ') }))}
      />
      <FormQuantity
        kind="length"
        name="altitude"
        label={t('sites.altitude')}
        hint={t('sites.altitudeHint')}
        units={['m', 'ft']}
        allowNegative
        min={-430}
        max={5000}
        example={length === 'ft' ? '400 ft' : '120 m'}
      />
      <FormSelect
        name="jurisdiction"
        label={t('sites.jurisdiction')}
        choices={JURISDICTIONS.map((value) => ({ value, label: t(`sites.jurisdiction.${value}`) }))}
      />
    </>
  );
}

function Address() {
  const t = useMessages();
  const { field } = useController({ name: 'address' });
  const error = useFieldError('address');
  return (
    <Field layout="row" label={t('sites.address')} hint={t('sites.addressHint')} error={error}>
      {(ids) => (
        <textarea
          {...ids}
          {...field}
          rows={3}
          maxLength={600}
          className={`${blank(!!error, false)} px-3 py-2 text-right`}
        />
      )}
    </Field>
  );
}
