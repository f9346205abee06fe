import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import { FULL_CHARGE_METHODS, type FullChargeMethod } from '../../../../shared/unit-register/unit.schema.ts';
import { usePermission } from '../../../api/session.ts';
import { siteQueries } from '../../../api/sites.ts';
import { useMessages } from '../../../lib/messages.ts';
import { useRefrigerantNames } from '../../../lib/refrigerant-names.ts';
import { ButtonLink } from '../../../ui/button.tsx';
import { Caution } from '../../../ui/caution.tsx';
import { FieldError, SelectField } from '../../../ui/field.tsx';
import { Notice } from '../../../ui/notice.tsx';
import { QuantityInput } from '../../../ui/quantity-input.tsx';
import { isEmptied } from '../emptied.ts';
import type { Of } from '../question-props.ts';
import { becomesFlammable } from '../safety-class.ts';

const MASS_UNITS = ['g', 'kg', 'lb', 'oz'] as const;

/** Another site than the one where the unit stands. */
export function SiteQuestion({ answers, context, change, error }: Of<'site'>) {
  const t = useMessages();
  const mayAdd = usePermission('sites:write');
  const sites = useQuery(siteQueries.choice()).data ?? [];
  return (
    <>
      {context.unit ? (
        <p className="text-[0.9375rem] leading-snug text-ink-soft">
          {t('record.site.now', { site: context.unit.siteName, customer: context.unit.customerName })}
        </p>
      ) : null}
      <SelectField
        layout="row"
        label={t('record.site.new')}
        placeholder={t('record.site.choose')}
        choices={sites
          .filter(({ id }) => id !== context.unit?.siteId)
          .map(({ id, name, customerName }) => ({ value: id, label: t('record.site.option', { name, customerName }) }))}
        value={answers.siteId}
        error={error('siteId')}
        onChange={(event) => change({ siteId: event.target.value })}
      />
      {mayAdd ? (
        <Link to="/sites/new" className="inline-flex min-h-12 items-center self-start">
          {t('record.site.add')}
        </Link>
      ) : (
        <p className="text-[0.9375rem] text-ink-soft">{t('record.site.missing')}</p>
      )}
    </>
  );
}

/** The old refrigerant is out before another comes in: by the book, so that what was recovered stands in the log. */
export function EmptiedQuestion({ answers, context, error }: Of<'emptied'>) {
  const t = useMessages();
  const { unit } = context;
  if (!unit) return <p className="text-ink-soft">{t('record.need.unit')}</p>;
  if (isEmptied(unit)) return <p>{t('record.emptied.yes', { refrigerant: unit.refrigerant })}</p>;
  return (
    <div className="flex flex-col gap-3">
      <Notice title={t('record.emptied.no', { refrigerant: unit.refrigerant })}>{t('record.emptied.first')}</Notice>
      <ButtonLink kind="plain" to={`/record/recovery?unit=${answers.unitId}`}>
        {t('record.form.recovery')}
      </ButtonLink>
      <ButtonLink kind="plain" to={`/record/vacuum?unit=${answers.unitId}`}>
        {t('record.form.vacuum')}
      </ButtonLink>
      {error('emptied') ? <FieldError>{error('emptied')}</FieldError> : null}
    </div>
  );
}

export function RefrigerantQuestion({ answers, context, change, error }: Of<'refrigerant'>) {
  const t = useMessages();
  const names = useRefrigerantNames();
  const classOf = (designation: string) => names.find((name) => name.designation === designation)?.safetyClass ?? '';
  const before = context.unit?.refrigerant ?? '';
  return (
    <>
      <SelectField
        layout="row"
        label={t('record.retrofit.refrigerant')}
        placeholder={t('record.certified.choose')}
        choices={names
          .filter(({ designation }) => designation !== before)
          .map(({ designation, safetyClass }) => ({
            value: designation,
            label: t('record.retrofit.option', { designation, safetyClass }),
          }))}
        value={answers.refrigerant}
        error={error('refrigerant')}
        onChange={(event) => change({ refrigerant: event.target.value })}
      />
      {answers.refrigerant && becomesFlammable(classOf(before), classOf(answers.refrigerant)) ? (
        <Caution signal="danger">
          {t('record.caution.flammableInstead', { refrigerant: answers.refrigerant, before })}
        </Caution>
      ) : null}
    </>
  );
}

/** How much of the new refrigerant the unit takes when full, and how that is known. */
export function FullChargeQuestion({ answers, change, error }: Of<'fullCharge'>) {
  const t = useMessages();
  return (
    <>
      <QuantityInput
        kind="mass"
        label={t('record.retrofit.fullCharge')}
        units={MASS_UNITS}
        draft={answers.mass}
        error={error('mass')}
        onChange={(mass) => change({ mass })}
      />
      <SelectField
        layout="row"
        label={t('record.retrofit.method')}
        choices={FULL_CHARGE_METHODS.map((value) => ({ value, label: t(`record.method.${value}`) }))}
        value={answers.method}
        error={error('method')}
        onChange={(event) => change({ method: event.target.value as FullChargeMethod })}
      />
    </>
  );
}
