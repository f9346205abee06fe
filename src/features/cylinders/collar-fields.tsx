import { useQuery } from '@tanstack/react-query';
import { pressureRule } from '../../../shared/cylinder-fill/filling-table.ts';
import { CONTENT_STATES, CYLINDER_KINDS } from '../../../shared/cylinders/cylinder.schema.ts';
import { customerQueries } from '../../api/customers.ts';
import { errorAt, type FormError } from '../../api/form-errors.ts';
import { partyQueries } from '../../api/parties.ts';
import { peopleQueries } from '../../api/people.ts';
import { usePermission, useSession } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { useRefrigerantNames } from '../../lib/refrigerant-names.ts';
import { ChoiceField, SelectField, TextField } from '../../ui/field.tsx';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { usePressure } from './cylinder-facts.tsx';
import { MASS_UNITS } from './form-parts.tsx';
import type { RegisterDraft } from './register-draft.ts';
import { type CylinderFigures, RATING_TEMP_C } from './use-cylinder-figures.ts';

interface Props {
  draft: RegisterDraft;
  errors: readonly FormError[];
  onChange: (change: Partial<RegisterDraft>) => void;
}

/** What it is, what is in it, whose it is and who has it. */
export function IdentityFields({ draft, errors, onChange }: Props) {
  const t = useMessages();
  const names = useRefrigerantNames();
  const seesPeople = usePermission('people:read');
  const people = useQuery({ ...peopleQueries.everybody(), enabled: seesPeople });
  const suppliers = useQuery(partyQueries.choice('supplier'));
  const contractors = useQuery(partyQueries.choice('otherContractor'));
  const customers = useQuery(customerQueries.choice());
  const owned = (kind: 'party' | 'customer', list: readonly { id: string; name: string }[] | undefined) =>
    list?.map(({ id, name }) => ({ value: `${kind}:${id}`, label: name })) ?? [];
  return (
    <>
      <TextField
        layout="row"
        big
        label={t('cylinders.new.tag')}
        value={draft.tag}
        maxLength={40}
        autoComplete="off"
        placeholder="7741"
        error={errorAt(errors, '/tag')}
        onChange={(event) => onChange({ tag: event.target.value })}
      />
      <ChoiceField
        label={t('cylinders.kind')}
        name="kind"
        value={draft.kind}
        choices={CYLINDER_KINDS.map((kind) => ({ value: kind, label: t(`cylinders.kind.${kind}`) }))}
        onChange={(value) => {
          const kind = value as RegisterDraft['kind'];
          // What comes out of units has been recovered; a new cylinder for it holds nothing yet.
          const recovery = kind === 'recovery';
          onChange({
            kind,
            ...(recovery && draft.contentState === 'virgin' ? { contentState: 'recovered', begins: 'empty' } : {}),
            ...(!recovery && draft.kind === 'recovery' ? { contentState: 'virgin', begins: 'bought' } : {}),
          });
        }}
      />
      <SelectField
        layout="row"
        label={t('cylinders.refrigerant')}
        placeholder={t('cylinders.form.choose')}
        choices={names.map(({ designation, safetyClass }) => ({
          value: designation,
          label: `${designation}, ${safetyClass}`,
        }))}
        value={draft.refrigerant}
        error={errorAt(errors, '/refrigerant') ? t('cylinders.form.refrigerantNeeded') : undefined}
        onChange={(event) => onChange({ refrigerant: event.target.value })}
      />
      <SelectField
        layout="row"
        label={t('cylinders.contentState')}
        choices={CONTENT_STATES.map((state) => ({ value: state, label: t(`cylinders.state.${state}`) }))}
        value={draft.contentState}
        onChange={(event) => onChange({ contentState: event.target.value as RegisterDraft['contentState'] })}
      />
      <SelectField
        layout="row"
        label={t('cylinders.owner')}
        groups={[
          { label: t('cylinders.owner.groupOurs'), choices: [{ value: 'ours', label: t('cylinders.owner.ours') }] },
          { label: t('cylinders.owner.groupSuppliers'), choices: owned('party', suppliers.data) },
          { label: t('cylinders.owner.groupContractors'), choices: owned('party', contractors.data) },
          { label: t('cylinders.owner.groupCustomers'), choices: owned('customer', customers.data) },
        ].filter(({ choices }) => choices.length > 0)}
        value={draft.owner}
        error={errorAt(errors, '/owner')}
        onChange={(event) => onChange({ owner: event.target.value })}
      />
      {seesPeople ? (
        <SelectField
          layout="row"
          label={t('cylinders.holder')}
          placeholder={t('cylinders.nobody')}
          choices={
            people.data
              ?.filter(({ active }) => active)
              .map(({ id, name, van }) => ({ value: id, label: van ? `${name}, ${van}` : name })) ?? []
          }
          value={draft.heldBy}
          error={errorAt(errors, '/heldBy')}
          onChange={(event) => onChange({ heldBy: event.target.value })}
        />
      ) : null}
    </>
  );
}

/** What is stamped on the collar. */
export function CollarFields({ draft, errors, figures, onChange }: Props & { figures: CylinderFigures }) {
  const t = useMessages();
  const format = useFormat();
  const pressure = usePressure();
  const { clause } = pressureRule(useSession()?.firm.jurisdiction ?? null);
  return (
    <>
      <h2 className="type-title pt-6 pb-1 text-[1.25rem]">{t('cylinders.new.collar')}</h2>
      <QuantityInput
        kind="mass"
        label={t('cylinders.tare')}
        units={MASS_UNITS}
        draft={draft.tare}
        min={0.001}
        error={errorAt(errors, '/tare/mass') ? t('cylinders.form.massNeeded') : undefined}
        onChange={(tare) => onChange({ tare })}
      />
      <TextField
        layout="row"
        type="date"
        label={t('cylinders.new.tareFrom')}
        value={draft.tareFrom}
        error={errorAt(errors, '/tare/validFrom')}
        onChange={(event) => onChange({ tareFrom: event.target.value })}
      />
      <QuantityInput
        kind="mass"
        label={t('cylinders.waterCapacity')}
        hint={
          figures.ruleLimitG === null
            ? undefined
            : t('cylinders.new.ruleGives', { mass: format.massAbout(figures.ruleLimitG) })
        }
        units={MASS_UNITS}
        draft={draft.waterCapacity}
        min={0.001}
        error={errorAt(errors, '/waterCapacity') ? t('cylinders.form.massNeeded') : undefined}
        onChange={(waterCapacity) => onChange({ waterCapacity })}
      />
      <QuantityInput
        kind="mass"
        label={t('cylinders.stampedLimit')}
        hint={t('cylinders.new.ifStamped')}
        units={MASS_UNITS}
        draft={draft.stampedLimit}
        min={0.001}
        error={errorAt(errors, '/stampedLimit') ? t('cylinders.form.massNeeded') : undefined}
        onChange={(stampedLimit) => onChange({ stampedLimit })}
      />
      <QuantityInput
        kind="pressureGauge"
        label={t('cylinders.pressure')}
        hint={
          figures.pressureAt55KPaGauge === null
            ? undefined
            : t(clause === null ? 'cylinders.pressure.needs' : 'cylinders.pressure.needsStamped', {
                refrigerant: draft.refrigerant,
                pressure: pressure(figures.pressureAt55KPaGauge),
                clause: clause ?? '',
                temperature: RATING_TEMP_C,
              })
        }
        units={['psi', 'bar', 'kPa']}
        draft={draft.servicePressure}
        min={0.1}
        max={30_000}
        error={errorAt(errors, '/servicePressureKPaGauge') ? t('cylinders.form.pressureNeeded') : undefined}
        onChange={(servicePressure) => onChange({ servicePressure })}
      />
      <TextField
        layout="row"
        type="date"
        label={t('cylinders.retest')}
        value={draft.retestDue}
        error={errorAt(errors, '/retestDue')}
        onChange={(event) => onChange({ retestDue: event.target.value })}
      />
      <TextField
        layout="row"
        label={t('cylinders.batch')}
        value={draft.batch}
        maxLength={60}
        autoComplete="off"
        error={errorAt(errors, '/batch')}
        onChange={(event) => onChange({ batch: event.target.value })}
      />
    </>
  );
}
