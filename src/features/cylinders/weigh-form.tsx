import { useState } from 'react';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { ASSUMED_SCALE, grossVarianceG2, type Scale } from '../../../shared/ledger/scale.ts';
import { verdictOf } from '../../../shared/scale/reconcile.ts';
import { microgramsOfGrams } from '../../../shared/units/mass.ts';
import { usePostGroup } from '../../api/entries.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, instantOfLocal, toLocalInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Caution } from '../../ui/caution.tsx';
import { TextField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { emptyQuantity, type QuantityDraft, readQuantity } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { FormFoot, MASS_UNITS, massUnitOf, ScaleField, useChosenScale, WhenField } from './form-parts.tsx';

interface Draft {
  groupId: string;
  readingId: string;
  gross: QuantityDraft<'mass'>;
  /** Null: nothing chosen yet. */
  toolId: string | null;
  at: string;
  reason: string;
}

const SHOWN = ['/readings/0/value', '/occurredAt', '/reason'];

/** One gross reading: the book follows the scale, and what it does not explain is entered with it. */
export function WeighForm({
  cylinder,
  onDone,
  onCancel,
}: {
  cylinder: Cylinder;
  onDone: (message: string) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const post = usePostGroup();
  const [draft, setDraft, clear] = useDraft<Draft>(`cylinder.${cylinder.id}.weigh`, () => ({
    groupId: newId(),
    readingId: newId(),
    gross: emptyQuantity(massUnitOf(preferences.mass)),
    toolId: null,
    at: toLocalInput(deviceNow()),
    reason: '',
  }));
  const [errors, setErrors] = useState<FormError[]>([]);
  const tool = useChosenScale(draft.toolId);
  const reading = readQuantity('mass', draft.gross, { locale: preferences.locale });
  const grossG = reading.is === 'read' ? reading.base : null;
  const scale = tool?.scale ?? ASSUMED_SCALE;
  const reasonError = errorAt(errors, '/reason');
  const set = (change: Partial<Draft>) => setDraft((now) => ({ ...now, ...change }));
  const send = () => {
    const body = {
      groupId: draft.groupId,
      schema: 1 as const,
      kind: 'weighing' as const,
      occurredAt: instantOfLocal(draft.at) ?? '',
      deviceSentAt: deviceNow().toISOString(),
      readings: [
        {
          id: draft.readingId,
          cylinderId: cylinder.id,
          toolId: tool?.id ?? null,
          moment: 'only' as const,
          mode: 'gross' as const,
          value: reading.is === 'read' ? reading.typed.value : '',
          unit: reading.is === 'read' ? reading.typed.unit : 'g',
        },
      ],
      entries: [],
      statements: [],
      documents: [],
      reason: draft.reason.trim() || null,
    };
    const found = schemaErrors(entryGroupRequest, body).map((error) =>
      error.pointer.startsWith('/readings/0') ? { ...error, message: t('cylinders.form.readingNeeded') } : error,
    );
    setErrors(found);
    if (found.length > 0) return;
    post.mutate(body as never, {
      onSuccess: ({ entries }) => {
        clear();
        const moved = entries.reduce((sum, { massG, to }) => sum + (to.id === cylinder.id ? massG : -massG), 0);
        onDone(
          entries.length === 0
            ? t('cylinders.weigh.doneSame')
            : t('cylinders.weigh.done', { mass: format.massAbout(Math.abs(moved)) }),
        );
      },
      onError: (error) => setErrors(answerErrors(error)),
    });
  };
  return (
    <form
      noValidate
      className="flex flex-col"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <QuantityInput
        kind="mass"
        label={t('cylinders.form.gross')}
        units={MASS_UNITS}
        draft={draft.gross}
        hint={t('cylinders.form.grossHint', { tare: format.massAbout(cylinder.tareG) })}
        error={errorAt(errors, '/readings/0/value')}
        onChange={(gross) => set({ gross })}
      />
      <ScaleField scale={tool} onChange={(toolId) => set({ toolId })} />
      <WhenField
        label={t('cylinders.form.readAt')}
        value={draft.at}
        error={errorAt(errors, '/occurredAt')}
        onChange={(at) => set({ at })}
      />
      <div className="min-h-[4.5rem] py-2" aria-live="polite">
        {grossG === null ? null : <Against cylinder={cylinder} grossG={grossG} scale={scale} />}
      </div>
      {reasonError ? (
        <TextField
          label={t('cylinders.form.reason')}
          value={draft.reason}
          maxLength={1000}
          error={reasonError}
          onChange={(event) => set({ reason: event.target.value })}
        />
      ) : null}
      <FormFoot
        errors={errors}
        shown={SHOWN}
        busy={post.isPending}
        act={grossG === null ? t('cylinders.weigh.act') : t('cylinders.weigh.actGross', { mass: format.mass(grossG) })}
        onCancel={onCancel}
      />
    </form>
  );
}

/** The reading against the book while it is typed: what is in it, what differs, and whether the scale explains that. */
function Against({ cylinder, grossG, scale }: { cylinder: Cylinder; grossG: number; scale: Scale }) {
  const t = useMessages();
  const format = useFormat();
  const contentG = grossG - cylinder.tareG;
  if (contentG < 0) {
    return (
      <Notice title={t('cylinders.weigh.belowTare', { mass: format.massAbout(-contentG) })}>
        {t('cylinders.weigh.belowTareHint', { tare: format.massAbout(cylinder.tareG) })}
      </Notice>
    );
  }
  const differenceG = contentG - cylinder.contentG;
  const standardG = Math.sqrt(grossVarianceG2(scale, microgramsOfGrams(contentG)));
  const verdict = verdictOf(Math.abs(differenceG), standardG);
  const first = cylinder.lastWeighedAt === null && cylinder.contentG === 0;
  return (
    <div className="flex flex-col gap-2">
      <p>
        {t('cylinders.weigh.content', { mass: format.massAbout(contentG) })}
        {first ? null : (
          <>
            {' '}
            {t(differenceG < 0 ? 'cylinders.weigh.less' : 'cylinders.weigh.more', {
              mass: format.massAbout(Math.abs(differenceG)),
              book: format.massAbout(cylinder.contentG),
            })}{' '}
            <strong className="font-[650]">{t(`cylinders.verdict.${verdict}`)}</strong>
            <span className="type-label pl-1.5 text-[0.9375rem] text-ink-soft">
              {t('cylinders.weigh.uncertainty', { mass: format.massAbout(2 * standardG) })}
            </span>
          </>
        )}
      </p>
      {cylinder.limitG !== null && contentG > cylinder.limitG ? (
        <Caution signal="danger">
          {t('cylinders.danger.overLimit', {
            given: format.massAbout(contentG),
            allowed: format.massAbout(cylinder.limitG),
          })}
        </Caution>
      ) : null}
    </div>
  );
}
