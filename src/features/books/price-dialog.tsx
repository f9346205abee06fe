import { useState } from 'react';
import { addPriceRequest, type PurchaseRow } from '../../../shared/books/books.schema.ts';
import { MASS_FACTORS } from '../../../shared/units/factors.ts';
import { useAddPrice } from '../../api/books.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { AmountInput, amountDraft, readAmount } from '../../ui/amount-input.tsx';
import { ChoiceField, TextField } from '../../ui/field.tsx';
import { money } from './book-words.ts';
import { DialogForm } from './dialog-form.tsx';

const SHOWN = ['/price/value', '/currency'];

/** What a purchase cost. A price given again takes the place of the one before; both stay on record. */
export function PriceDialog({
  purchase,
  currency,
  onClose,
}: {
  purchase: PurchaseRow;
  currency: string;
  onClose: () => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const { locale, mass } = usePreferences();
  const add = useAddPrice();
  const [id] = useState(newId);
  const [draft, setDraft] = useState(() => amountDraft(purchase.price?.value, locale));
  const [per, setPer] = useState<'kg' | 'lb'>(purchase.price?.per ?? (mass === 'lbOz' || mass === 'oz' ? 'lb' : 'kg'));
  const [currencyText, setCurrencyText] = useState(currency);
  const [errors, setErrors] = useState<FormError[]>([]);
  const value = readAmount(draft) || null;
  const massOf = purchase.massG / MASS_FACTORS[per].perUnit.valueOf();
  const send = () => {
    const body = {
      id,
      groupId: purchase.groupId,
      refrigerant: purchase.refrigerant,
      price: { value: value ?? '', per },
      currency: currencyText.trim().toUpperCase(),
    };
    const found = schemaErrors(addPriceRequest, body);
    setErrors(found);
    if (found.length > 0) return;
    add.mutate(body, { onSuccess: onClose, onError: (error) => setErrors(answerErrors(error)) });
  };
  return (
    <DialogForm
      title={t('books.price.title', { refrigerant: purchase.refrigerant, supplier: purchase.supplierName })}
      act={
        value === null
          ? t('books.price.keep')
          : t('books.price.keepOf', { cost: money(locale, Number(value) * massOf, currencyOf(currencyText, currency)) })
      }
      busy={add.isPending}
      errors={errors}
      shown={SHOWN}
      onSend={send}
      onClose={onClose}
    >
      <p className="text-ink-soft">
        {t('books.price.lead', {
          mass: format.mass(purchase.massG),
          paper: purchase.documentNumber ?? t('books.price.noPaper'),
        })}
      </p>
      <AmountInput
        label={t('books.price.value')}
        draft={draft}
        error={errorAt(errors, '/price/value') ? t('books.price.valueNeeded') : undefined}
        onChange={setDraft}
      />
      <ChoiceField
        label={t('books.price.per')}
        name="per"
        value={per}
        choices={[
          { value: 'kg', label: t('books.price.per.kg') },
          { value: 'lb', label: t('books.price.per.lb') },
        ]}
        onChange={(unit) => setPer(unit === 'lb' ? 'lb' : 'kg')}
      />
      <TextField
        label={t('books.price.currency')}
        hint={t('books.price.currency.hint')}
        autoComplete="off"
        maxLength={3}
        value={currencyText}
        error={errorAt(errors, '/currency')}
        onChange={({ target }) => setCurrencyText(target.value)}
      />
    </DialogForm>
  );
}

/** While a currency is being typed the one before stands in. */
const currencyOf = (text: string, before: string): string =>
  /^[A-Za-z]{3}$/.test(text.trim()) ? text.trim().toUpperCase() : before;
