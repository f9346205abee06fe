import type { EntryPreviewResponse } from '../../../shared/entry-previews/entry-preview.schema.ts';
import { FLAG_LEVELS, type FlagCode } from '../../../shared/ledger/flag.ts';
import { placeWords, reasonWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Caution } from '../../ui/caution.tsx';
import { TextField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import type { Answers, FormContext, FullAnswer } from './answers.ts';
import { BalanceBeams } from './balance-beams.tsx';
import { FULL_ANSWERS } from './questions/plain-questions.tsx';
import { RadioLines } from './radio-lines.tsx';

/** What would be posted, in words and on beams, the question it asks and the reason it needs; nothing of it is stored. */
export function PreviewPanel({
  preview,
  kind,
  answers,
  context,
  change,
  reasonError,
}: {
  preview: EntryPreviewResponse;
  kind: string;
  answers: Answers;
  context: FormContext;
  change: (part: Partial<Answers>) => void;
  reasonError: string | undefined;
}) {
  const t = useMessages();
  const format = useFormat();
  const { entries, balances, flags, questions, reasons, warnings } = preview;
  const [question] = questions;
  return (
    <div className="flex flex-col gap-5">
      {question ? (
        <div className="border-l-4 border-ink pl-4">
          <h3 className="text-[1.0625rem] font-[650]">{t('record.full.title')}</h3>
          <p className="pb-2 text-[0.9375rem] leading-snug text-ink-soft">
            {question.bookG === null
              ? t('record.full.whyNotKnown')
              : question.fullChargeG === null
                ? t('record.full.whyNoFullCharge', { book: format.mass(question.bookG) })
                : t('record.full.why', {
                    book: format.mass(question.bookG),
                    full: format.mass(question.fullChargeG),
                  })}
          </p>
          <RadioLines
            legend={t('record.full.title')}
            hideLegend
            name="howFull"
            value={answers.answer ?? ''}
            lines={FULL_ANSWERS.map((value) => ({
              value,
              label: t(`record.full.${value}`),
              detail: t(`record.full.${value}.detail`),
            }))}
            onChange={(value) => change({ answer: value as FullAnswer })}
          />
          {answers.answer === null ? (
            <p className="pt-2 text-[0.9375rem] text-ink-soft">{t('record.full.later')}</p>
          ) : null}
        </div>
      ) : null}
      <BalanceBeams balances={balances} context={context} />
      <section aria-label={t('record.preview.entries')}>
        <h3 className="type-label pb-1 text-ink-soft">{t('record.preview.entries')}</h3>
        {entries.length === 0 ? <p className="border-y border-rule py-2">{t('record.preview.none')}</p> : null}
        <ul className="border-t border-rule">
          {entries.map((entry) => (
            <li
              key={entry.id}
              className="grid grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-4 border-b border-rule py-2"
            >
              <span className="leading-snug">
                {placeWords(t, entry.from)} <span className="text-move">{'\u2192'}</span>
                <span className="sr-only">{t('record.preview.to')}</span> {placeWords(t, entry.to)}
                {entry.addedByServer || entry.correctsGroupId ? (
                  <span className="type-label block text-[0.9375rem] text-ink-soft">
                    {[
                      entry.correctsGroupId && !entry.addedByServer
                        ? t('record.preview.takenBack')
                        : reasonWords(t, { ...entry, kind: kind as never, from: entry.from, to: entry.to }),
                      entry.atLeast ? t('record.preview.atLeast') : '',
                    ]
                      .filter(Boolean)
                      .join(', ')}
                  </span>
                ) : null}
              </span>
              <strong className="font-[680] whitespace-nowrap">
                {format.mass(entry.massG)}
                <span className="type-label block text-right text-[0.875rem] font-[400] text-ink-soft">
                  {entry.refrigerant}
                </span>
              </strong>
            </li>
          ))}
        </ul>
      </section>
      {flags.length > 0 ? (
        <section aria-label={t('record.preview.flags')} className="flex flex-col gap-2">
          <h3 className="type-label text-ink-soft">{t('record.preview.flags')}</h3>
          {flags.map((flag) =>
            FLAG_LEVELS[flag.code as FlagCode] === 'danger' ? (
              <Caution key={`${flag.code} ${flag.subject.id} ${flag.refrigerant}`} signal="danger">
                {flag.message}
              </Caution>
            ) : (
              <Notice key={`${flag.code} ${flag.subject.id} ${flag.refrigerant}`}>{flag.message}</Notice>
            ),
          )}
        </section>
      ) : null}
      {warnings.map((warning) => (
        <Notice key={warning.code}>{warning.message}</Notice>
      ))}
      {reasons.length > 0 ? (
        <div className="flex flex-col gap-2 border-y-2 border-ink py-3">
          {reasons.map((reason) => (
            <Caution key={`${reason.code} ${reason.message}`} signal="danger">
              {reason.message}
            </Caution>
          ))}
          <TextField
            label={t('record.reason')}
            value={answers.reason}
            maxLength={1000}
            error={reasonError}
            onChange={(event) => change({ reason: event.target.value })}
          />
        </div>
      ) : null}
    </div>
  );
}
