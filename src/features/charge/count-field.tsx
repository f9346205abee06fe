import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { TextField } from '../../ui/field.tsx';
import { useChargeForm } from './charge-form.ts';
import { type Pointer, readPlainNumber } from './draft-to-request.ts';

/** A number without a unit: how many bends, a factor of the manual. */
export function CountField({
  label,
  pointer,
  value,
  onChange,
  max,
  whole = true,
  hint,
}: {
  label: string;
  pointer: Pointer;
  value: string;
  onChange: (value: string) => void;
  max: number;
  whole?: boolean;
  hint?: string;
}) {
  const t = useMessages();
  const { locale } = usePreferences();
  const { errorAt } = useChargeForm();
  const read = value.trim() === '' ? 0 : readPlainNumber(value);
  const typed = value.trim();
  const own =
    read === null || (whole && !Number.isInteger(read))
      ? t(whole ? 'chargeScreen.error.wholeNumber' : 'chargeScreen.error.number', { typed })
      : read > max
        ? t('ui.quantity.tooLarge', { given: typed, allowed: max.toLocaleString(locale) })
        : undefined;
  return (
    <TextField
      layout="row"
      label={label}
      hint={hint}
      name={pointer}
      value={value}
      inputMode={whole ? 'numeric' : 'decimal'}
      autoComplete="off"
      error={errorAt(pointer) ?? own}
      onChange={(event) => onChange(event.target.value)}
    />
  );
}
