import { useFormat } from '../../lib/format.ts';
import { instantOfLocal, toLocalInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { Disclosure } from '../../ui/disclosure.tsx';
import { blank, Field, TextField } from '../../ui/field.tsx';

const REASON_LENGTH = 1000;
const NOTE_LENGTH = 4000;

/** When it was done, if not just now, and a note: what nobody has to say. */
export function SayMore({
  note,
  occurredAt,
  onChange,
}: {
  note: string;
  /** RFC 3339; null hides the time. */
  occurredAt: string | null;
  onChange: (part: { note?: string; occurredAt?: string }) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  return (
    <Disclosure
      title={t('weighIn.more')}
      summary={note.trim() || (occurredAt ? format.dateTime(occurredAt) : undefined)}
    >
      <div className="flex flex-col gap-3">
        {occurredAt ? (
          <TextField
            big
            type="datetime-local"
            label={t('weighIn.more.when')}
            hint={t('weighIn.more.clock')}
            value={toLocalInput(new Date(occurredAt))}
            onChange={(event) => {
              const at = instantOfLocal(event.target.value);
              if (at !== null) onChange({ occurredAt: at });
            }}
          />
        ) : null}
        <Field label={t('weighIn.more.note')}>
          {(ids) => (
            <textarea
              {...ids}
              rows={3}
              maxLength={NOTE_LENGTH}
              value={note}
              onChange={(event) => onChange({ note: event.target.value })}
              className={`${blank(false, false)} px-3 py-2`}
            />
          )}
        </Field>
      </div>
    </Disclosure>
  );
}

/** Asked, not refused for good: what goes past a limit is posted with its reason. */
export function ReasonField({
  value,
  messages,
  onChange,
}: {
  value: string;
  messages: readonly string[];
  onChange: (reason: string) => void;
}) {
  const t = useMessages();
  return (
    <Field label={t('weighIn.reason')} error={messages.length > 0 ? messages.join(' ') : undefined}>
      {(ids) => (
        <textarea
          {...ids}
          rows={3}
          maxLength={REASON_LENGTH}
          value={value}
          onChange={(event) => onChange(event.target.value)}
          className={`${blank(messages.length > 0, true)} px-3 py-2`}
        />
      )}
    </Field>
  );
}
