import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import type { Tool } from '../../../shared/tools/tools.schema.ts';
import { errorsElsewhere, type FormError } from '../../api/form-errors.ts';
import { useSession } from '../../api/session.ts';
import { toolQueries } from '../../api/tools.ts';
import { useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Caution } from '../../ui/caution.tsx';
import { ChoiceField, FieldError, SelectField, TextField } from '../../ui/field.tsx';
import { useFocusFirstError } from '../../ui/focus-first-error.ts';
import type { FillDanger } from './fill-dangers.ts';

export const MASS_UNITS = ['g', 'kg', 'lb', 'oz'] as const;

/** The unit that a person's masses are typed in; pounds and ounces are typed as `11 lb 4.5 oz` in the field of pounds. */
export const massUnitOf = (mass: 'g' | 'kg' | 'oz' | 'lbOz') => (mass === 'lbOz' ? 'lb' : mass);

/**
 * The scale that a reading is taken with: the one chosen, else one's own, where there is just one. Null where none is
 * named; it then counts as one of 5 g steps.
 * @param chosen null: nothing chosen yet; empty: none
 */
export function useChosenScale(chosen: string | null): Tool | null {
  const scales = useQuery(toolQueries.choice('scale')).data;
  const me = useSession()?.person.id;
  if (chosen !== null) return scales?.find(({ id }) => id === chosen) ?? null;
  const own = scales?.filter(({ heldBy }) => heldBy === me) ?? [];
  return own.length === 1 ? (own[0] ?? null) : null;
}

export function ScaleField({ scale, onChange }: { scale: Tool | null; onChange: (toolId: string) => void }) {
  const t = useMessages();
  const scales = useQuery(toolQueries.choice('scale'));
  return (
    <SelectField
      layout="row"
      label={t('cylinders.form.scale')}
      hint={scale === null ? t('cylinders.form.noScaleHint') : undefined}
      placeholder={t('cylinders.form.noScale')}
      choices={scales.data?.map(({ id, name }) => ({ value: id, label: name })) ?? []}
      value={scale?.id ?? ''}
      onChange={(event) => onChange(event.target.value)}
    />
  );
}

/** When it happened, on the clock of this device. A day and a time are too long for half a phone's width. */
export function WhenField({
  label,
  value,
  error,
  onChange,
}: {
  label: string;
  value: string;
  error?: ReactNode;
  onChange: (value: string) => void;
}) {
  const phone = !useMedia('(width >= 48rem)');
  return (
    <TextField
      layout={phone ? 'stack' : 'row'}
      type="datetime-local"
      label={label}
      value={value}
      error={error}
      onChange={(event) => onChange(event.target.value)}
    />
  );
}

/**
 * What must not be done stands in the way of planning it. If it has been done already the log takes it, with the reason.
 */
export function DangerGate({
  dangers,
  happened,
  onHappened,
  reason,
  reasonError,
  onReason,
  name,
}: {
  dangers: readonly FillDanger[];
  happened: boolean;
  onHappened: (happened: boolean) => void;
  reason: string;
  reasonError?: ReactNode;
  onReason: (reason: string) => void;
  name: string;
}) {
  const t = useMessages();
  const format = useFormat();
  if (dangers.length === 0 && !reasonError) return null;
  return (
    <div className="flex flex-col gap-3 border-y-2 border-ink py-3">
      {dangers.map((danger) => (
        <Caution key={danger.is} signal="danger">
          {danger.is === 'overLimit'
            ? t('cylinders.danger.overLimit', {
                given: format.massAbout(danger.wouldHoldG),
                allowed: format.massAbout(danger.limitG),
              })
            : danger.is === 'otherRefrigerant'
              ? t('cylinders.danger.otherRefrigerant', { holds: danger.holds })
              : danger.is === 'pressure'
                ? t('cylinders.danger.pressure', { comes: danger.comes })
                : danger.is === 'retest'
                  ? t('cylinders.danger.retest', { month: format.month(danger.due.slice(0, 7)) })
                  : t('cylinders.danger.refill')}
        </Caution>
      ))}
      {dangers.length > 0 ? (
        <ChoiceField
          label={t('cylinders.danger.question')}
          name={name}
          value={happened ? 'happened' : 'planned'}
          choices={[
            { value: 'planned', label: t('cylinders.danger.planned') },
            { value: 'happened', label: t('cylinders.danger.happened') },
          ]}
          onChange={(value) => onHappened(value === 'happened')}
        />
      ) : null}
      {happened || reasonError ? (
        <TextField
          label={t('cylinders.form.reason')}
          value={reason}
          maxLength={1000}
          error={reasonError}
          onChange={(event) => onReason(event.target.value)}
        />
      ) : dangers.length > 0 ? (
        <p className="text-[0.9375rem] text-ink-soft">{t('cylinders.danger.stopped')}</p>
      ) : null}
    </div>
  );
}

/** What no field of the form shows, and the way on and back. */
export function FormFoot({
  errors,
  shown,
  act,
  busy,
  stopped = false,
  onCancel,
}: {
  errors: readonly FormError[];
  shown: readonly string[];
  act: string;
  busy: boolean;
  stopped?: boolean;
  onCancel?: () => void;
}) {
  const t = useMessages();
  useFocusFirstError(errors);
  return (
    <div className="flex flex-col gap-3 pt-2">
      {errorsElsewhere(errors, shown).map((message) => (
        <FieldError key={message}>{message}</FieldError>
      ))}
      <Button kind="act" wide type="submit" busy={busy} disabled={stopped}>
        {act}
      </Button>
      {onCancel ? <Button onClick={onCancel}>{t('cylinders.form.cancel')}</Button> : null}
    </div>
  );
}
