import { useQuery } from '@tanstack/react-query';
import { customerQueries } from '../../../api/customers.ts';
import { partyQueries } from '../../../api/parties.ts';
import { useMessages } from '../../../lib/messages.ts';
import { FieldError, SelectField, TextField } from '../../../ui/field.tsx';
import { QuantityInput } from '../../../ui/quantity-input.tsx';
import type { FullAnswer } from '../answers.ts';
import type { Of } from '../question-props.ts';
import { RadioLines } from '../radio-lines.tsx';

const MASS_UNITS = ['g', 'kg', 'lb', 'oz'] as const;
export const FULL_ANSWERS: readonly FullAnswer[] = ['full', 'notFull', 'moreThanFull', 'notKnown'];

export function ChoiceQuestion({ question, answers, change, error }: Of<'choice'>) {
  const t = useMessages();
  return (
    <RadioLines
      legend={t(`record.ask.${question.id}`)}
      hideLegend
      name={question.id}
      value={answers.choice}
      lines={question.options.map((value) => ({
        value,
        label: t(`record.choice.${value}`),
        detail: t(`record.choice.${value}.detail`),
      }))}
      error={error('choice')}
      onChange={(choice) => change({ choice })}
    />
  );
}

export function MassQuestion({ question, answers, change, error }: Of<'mass'>) {
  const t = useMessages();
  return (
    <QuantityInput
      kind="mass"
      label={t(`record.mass.${question.id}`)}
      units={MASS_UNITS}
      draft={answers.mass}
      error={error('mass')}
      onChange={(mass) => change({ mass })}
    />
  );
}

export function PartyQuestion({ question, answers, context, change, error }: Of<'party'>) {
  const t = useMessages();
  const isCustomer = question.of === 'customer';
  const customers = useQuery({ ...customerQueries.choice(), enabled: isCustomer }).data ?? [];
  const parties = useQuery({
    ...partyQueries.choice(question.of === 'customer' ? 'supplier' : question.of),
    enabled: !isCustomer,
  }).data;
  const choices = (isCustomer ? customers : (parties ?? [])).map(({ id, name }) => ({ value: id, label: name }));
  return (
    <>
      <SelectField
        layout="row"
        label={t(`record.party.${question.of}`)}
        placeholder={t('record.party.choose')}
        choices={choices}
        value={answers.partyId || (isCustomer ? (context.unit?.customerId ?? '') : '')}
        error={error('partyId')}
        onChange={(event) => change({ partyId: event.target.value })}
      />
      {!isCustomer && parties?.length === 0 ? (
        <p className="py-2 text-[0.9375rem] text-ink-soft">{t('record.party.none')}</p>
      ) : null}
    </>
  );
}

export function DocumentQuestion({ question, answers, change, error }: Of<'document'>) {
  const t = useMessages();
  return (
    <>
      <TextField
        layout="row"
        label={t('record.document.number')}
        hint={question.required ? undefined : t('record.document.optional')}
        value={answers.documentNumber}
        maxLength={80}
        error={error('documentNumber')}
        onChange={(event) => change({ documentNumber: event.target.value })}
      />
      <TextField
        layout="row"
        type="date"
        label={t('record.document.date')}
        value={answers.documentDate}
        error={error('documentDate')}
        onChange={(event) => change({ documentDate: event.target.value })}
      />
    </>
  );
}

/** When it happened, on the clock of this device. */
export function MomentQuestion({ answers, change, error }: Of<'moment'>) {
  const t = useMessages();
  return (
    <TextField
      layout="row"
      type="datetime-local"
      label={t('record.moment')}
      value={answers.at}
      error={error('at')}
      onChange={(event) => change({ at: event.target.value })}
    />
  );
}

export function ReasonQuestion({ answers, change, error }: Of<'reason'>) {
  const t = useMessages();
  return (
    <TextField
      label={t('record.reason')}
      value={answers.reason}
      maxLength={1000}
      error={error('reason')}
      onChange={(event) => change({ reason: event.target.value })}
    />
  );
}

export function TextQuestion({ question, answers, change, error }: Of<'text'>) {
  const t = useMessages();
  return (
    <TextField
      label={t(`record.text.${question.id}`)}
      value={answers.note}
      maxLength={3000}
      error={error('note')}
      onChange={(event) => change({ note: event.target.value })}
    />
  );
}

/** Where nobody has to say how full the unit is, but may. */
export function FullnessQuestion({ answers, change, error }: Of<'fullness'>) {
  const t = useMessages();
  return (
    <>
      <RadioLines
        legend={t('record.ask.fullness')}
        hideLegend
        name="fullness"
        value={answers.answer ?? 'none'}
        lines={[
          { value: 'none', label: t('record.full.none') },
          ...FULL_ANSWERS.map((value) => ({
            value,
            label: t(`record.full.${value}`),
            detail: t(`record.full.${value}.detail`),
          })),
        ]}
        onChange={(value) => change({ answer: value === 'none' ? null : (value as FullAnswer) })}
      />
      {error('answer') ? <FieldError>{error('answer')}</FieldError> : null}
    </>
  );
}
