import { useState } from 'react';
import { type LoaderFunctionArgs, useNavigate } from 'react-router-dom';
import { pressureRatingHolds } from '../../../shared/cylinder-fill/cylinder-limits.ts';
import { createCylinderRequest } from '../../../shared/cylinders/cylinder.schema.ts';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { useCreateCylinder } from '../../api/cylinders.ts';
import { usePostGroup } from '../../api/entries.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { requireSession, useSession } from '../../api/session.ts';
import { useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput, toLocalInput } from '../../lib/local-time.ts';
import { useMedia } from '../../lib/media.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { ChoiceField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { CollarFields, IdentityFields } from './collar-fields.tsx';
import { CylinderPreview } from './cylinder-preview.tsx';
import { fillDangers } from './fill-dangers.ts';
import { DangerGate, FormFoot, MASS_UNITS, massUnitOf, ScaleField, useChosenScale, WhenField } from './form-parts.tsx';
import { PURCHASE_PLACES, PurchaseFields } from './purchase-fields.tsx';
import {
  beginningRequest,
  cylinderRequest,
  emptyRegisterDraft,
  type RegisterDraft,
  readRegisterDraft,
} from './register-draft.ts';
import { useCylinderFigures } from './use-cylinder-figures.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('cylinders-screen', 'server')]);
  return null;
}

const SHOWN = [
  ...['/tag', '/refrigerant', '/owner', '/tare', '/waterCapacity', '/stampedLimit', '/servicePressureKPaGauge'],
  ...['/retestDue', '/heldBy', '/batch', '/readings/0', ...PURCHASE_PLACES],
];

/** A cylinder into the register, and how its content begins: bought, weighed, or empty. */
export function Component() {
  const t = useMessages();
  const format = useFormat();
  const navigate = useNavigate();
  const preferences = usePreferences();
  const wide = useMedia('(width >= 64rem)');
  const create = useCreateCylinder();
  const post = usePostGroup();
  const [draft, setDraft, clear] = useDraft<RegisterDraft>('cylinder.new', () =>
    emptyRegisterDraft(
      newId,
      {
        mass: massUnitOf(preferences.mass),
        pressure: preferences.pressure === 'psig' ? 'psi' : preferences.pressure,
      },
      { local: toLocalInput(deviceNow()), day: toDayInput(deviceNow()) },
    ),
  );
  const [errors, setErrors] = useState<FormError[]>([]);
  const set = (change: Partial<RegisterDraft>) => setDraft((now) => ({ ...now, ...change }));
  const setPurchase = (change: Partial<RegisterDraft['purchase']>) =>
    setDraft((now) => ({ ...now, purchase: { ...now.purchase, ...change } }));
  const setWeighing = (change: Partial<RegisterDraft['weighing']>) =>
    setDraft((now) => ({ ...now, weighing: { ...now.weighing, ...change } }));

  const tool = useChosenScale(draft.weighing.toolId);
  const read = readRegisterDraft(draft, preferences.locale);
  const massOf = (of: typeof read.tare) => (of.is === 'read' ? of.base : null);
  const figures = useCylinderFigures({
    kind: draft.kind,
    refrigerant: draft.refrigerant,
    waterCapacityG: massOf(read.waterCapacity),
  });
  const limitG = massOf(read.stampedLimit) ?? figures.ruleLimitG;
  const tareG = massOf(read.tare);
  const grossG = massOf(read.gross);
  const serviceKPa = read.servicePressure.is === 'read' ? read.servicePressure.base : null;
  const jurisdiction = useSession()?.firm.jurisdiction ?? null;
  const holds = pressureRatingHolds(serviceKPa, [draft.refrigerant], jurisdiction);
  const contentG =
    draft.begins === 'empty'
      ? 0
      : draft.begins === 'bought'
        ? massOf(read.bought)
        : grossG === null || tareG === null
          ? null
          : grossG - tareG;
  const dangers =
    contentG !== null && contentG > 0
      ? fillDangers(
          {
            kind: draft.kind,
            refrigerant: draft.refrigerant,
            contentG: 0,
            stampedLimitG: massOf(read.stampedLimit),
            waterCapacityG: massOf(read.waterCapacity),
            servicePressureKPaGauge: serviceKPa,
            retestDue: draft.retestDue || null,
            byRefrigerant: [],
            used: false,
          },
          { addedG: contentG, refrigerant: draft.refrigerant, day: toDayInput(deviceNow()), jurisdiction },
        )
      : [];

  const send = async () => {
    const cylinder = cylinderRequest(draft, read);
    const beginning = beginningRequest(draft, read, {
      toolId: tool?.id ?? null,
      deviceSentAt: deviceNow().toISOString(),
    });
    const found = [
      ...(draft.made ? [] : schemaErrors(createCylinderRequest, cylinder)),
      ...(beginning ? schemaErrors(entryGroupRequest, beginning) : []),
      ...(dangers.length > 0 && draft.purchase.reason.trim() === ''
        ? [{ pointer: '/reason', code: 'reasonRequired', message: t('cylinders.form.reasonNeeded') }]
        : []),
    ];
    setErrors(found);
    if (found.length > 0) return;
    try {
      if (!draft.made) await create.mutateAsync(cylinder);
      set({ made: true });
      if (beginning) await post.mutateAsync(beginning);
    } catch (error) {
      setErrors(answerErrors(error));
      return;
    }
    clear();
    await navigate(`/cylinders/${draft.id}`, { replace: true });
  };
  const name = draft.tag.trim();
  const preview = (
    <CylinderPreview
      tag={name}
      refrigerant={draft.refrigerant}
      tareG={tareG}
      contentG={contentG}
      limitG={limitG}
      figures={figures}
      holds={holds}
    />
  );
  return (
    <Page title={t('cylinders.new.title')} lead={t('cylinders.new.lead')} field>
      <div className="page-gutter grid w-full max-w-[90rem] gap-x-12 gap-y-4 pt-4 lg:grid-cols-[minmax(0,34rem)_minmax(0,1fr)]">
        <form
          noValidate
          className="flex min-w-0 flex-col"
          onSubmit={(event) => {
            event.preventDefault();
            void send();
          }}
        >
          {draft.made ? <Notice title={t('cylinders.new.made', { tag: name })} /> : null}
          <fieldset disabled={draft.made} className="contents">
            <IdentityFields draft={draft} errors={errors} onChange={set} />
            <CollarFields draft={draft} errors={errors} figures={figures} onChange={set} />
          </fieldset>
          <h2 className="type-title pt-6 pb-1 text-[1.25rem]">{t('cylinders.new.begins')}</h2>
          <ChoiceField
            label={t('cylinders.new.beginsHow')}
            name="begins"
            value={draft.begins}
            choices={(['bought', 'weighed', 'empty'] as const).map((value) => ({
              value,
              label: t(`cylinders.new.begins.${value}`),
            }))}
            onChange={(begins) => set({ begins: begins as RegisterDraft['begins'] })}
          />
          {draft.begins === 'bought' ? (
            <PurchaseFields draft={draft.purchase} errors={errors} onChange={setPurchase} />
          ) : draft.begins === 'weighed' ? (
            <>
              <QuantityInput
                kind="mass"
                label={t('cylinders.form.gross')}
                hint={tareG === null ? undefined : t('cylinders.form.grossHint', { tare: format.mass(tareG) })}
                units={MASS_UNITS}
                draft={draft.weighing.gross}
                error={errorAt(errors, '/readings/0') ? t('cylinders.form.readingNeeded') : undefined}
                onChange={(gross) => setWeighing({ gross })}
              />
              <ScaleField scale={tool} onChange={(toolId) => setWeighing({ toolId })} />
              <WhenField
                label={t('cylinders.form.readAt')}
                value={draft.weighing.at}
                error={errorAt(errors, '/occurredAt')}
                onChange={(at) => setWeighing({ at })}
              />
            </>
          ) : (
            <p className="py-2 text-[0.9375rem] text-ink-soft">{t('cylinders.new.emptyHint')}</p>
          )}
          {wide || (tareG === null && contentG === null) ? null : <div className="pt-5">{preview}</div>}
          <DangerGate
            name="begin-danger"
            dangers={dangers}
            happened={draft.purchase.happened}
            onHappened={(happened) => setPurchase({ happened })}
            reason={draft.purchase.reason}
            reasonError={errorAt(errors, '/reason')}
            onReason={(reason) => setPurchase({ reason })}
          />
          <FormFoot
            errors={errors}
            shown={SHOWN}
            busy={create.isPending || post.isPending}
            stopped={dangers.length > 0 && !draft.purchase.happened}
            act={name ? t('cylinders.new.act', { tag: name }) : t('cylinders.new.actUnnamed')}
          />
        </form>
        {wide ? preview : null}
      </div>
    </Page>
  );
}
