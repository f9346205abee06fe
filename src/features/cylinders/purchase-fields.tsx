import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { errorAt, type FormError } from '../../api/form-errors.ts';
import { partyQueries } from '../../api/parties.ts';
import { useMessages } from '../../lib/messages.ts';
import { ChoiceField, SelectField, TextField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { MASS_UNITS, WhenField } from './form-parts.tsx';
import type { PurchaseDraft } from './purchase.ts';

/** Places of a purchase request that these fields show what is wrong with. */
export const PURCHASE_PLACES = ['/entries/0/from', '/entries/0/mass', '/documents/0', '/occurredAt', '/reason'];

export function PurchaseFields({
  draft,
  errors,
  onChange,
}: {
  draft: PurchaseDraft;
  errors: readonly FormError[];
  onChange: (change: Partial<PurchaseDraft>) => void;
}) {
  const t = useMessages();
  const suppliers = useQuery(partyQueries.choice('supplier'));
  return (
    <>
      {suppliers.data?.length === 0 ? (
        <Notice title={t('cylinders.buy.noSupplier')}>
          <Link to="/parties">{t('cylinders.toParties')}</Link>
        </Notice>
      ) : (
        <SelectField
          layout="row"
          label={t('cylinders.buy.supplier')}
          placeholder={t('cylinders.form.choose')}
          choices={suppliers.data?.map(({ id, name }) => ({ value: id, label: name })) ?? []}
          value={draft.supplierId}
          error={errorAt(errors, '/entries/0/from') ? t('cylinders.buy.supplierNeeded') : undefined}
          onChange={(event) => onChange({ supplierId: event.target.value })}
        />
      )}
      <QuantityInput
        kind="mass"
        label={t('cylinders.buy.mass')}
        units={MASS_UNITS}
        draft={draft.mass}
        min={0.001}
        error={errorAt(errors, '/entries/0/mass') ? t('cylinders.form.massNeeded') : undefined}
        onChange={(mass) => onChange({ mass })}
      />
      <ChoiceField
        label={t('cylinders.buy.by')}
        name="purchase-by"
        value={draft.by}
        choices={[
          { value: 'label', label: t('cylinders.buy.byLabel') },
          { value: 'invoice', label: t('cylinders.buy.byInvoice') },
        ]}
        onChange={(by) => onChange({ by: by as PurchaseDraft['by'] })}
      />
      {draft.by === 'invoice' ? (
        <>
          <TextField
            layout="row"
            label={t('cylinders.buy.invoiceNumber')}
            hint={draft.invoiceNumber.trim() === '' ? t('cylinders.buy.toFollow') : undefined}
            value={draft.invoiceNumber}
            maxLength={80}
            autoComplete="off"
            error={errorAt(errors, '/documents/0/number')}
            onChange={(event) => onChange({ invoiceNumber: event.target.value })}
          />
          {draft.invoiceNumber.trim() === '' ? null : (
            <TextField
              layout="row"
              type="date"
              label={t('cylinders.buy.invoiceDate')}
              value={draft.invoiceDate}
              error={errorAt(errors, '/documents/0/date')}
              onChange={(event) => onChange({ invoiceDate: event.target.value })}
            />
          )}
        </>
      ) : null}
      <WhenField
        label={t('cylinders.buy.at')}
        value={draft.at}
        error={errorAt(errors, '/occurredAt')}
        onChange={(at) => onChange({ at })}
      />
    </>
  );
}
