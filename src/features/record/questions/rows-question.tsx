import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { newId } from '../../../lib/new-id.ts';
import { Button } from '../../../ui/button.tsx';
import { Caution } from '../../../ui/caution.tsx';
import { FieldError, TextField } from '../../../ui/field.tsx';
import { emptyRow, type MassUnit, type WeighedRow } from '../answers.ts';
import type { Of } from '../question-props.ts';
import { RadioLines } from '../radio-lines.tsx';
import { limitOfRow, type RowDanger, rowDangers } from '../row-dangers.ts';
import { RowFields } from './row-fields.tsx';

/** The cylinders of a form, each with its readings. What must not go into one stands in the way at once. */
export function RowsQuestion({ question, answers, context, change, error }: Of<'rows'>) {
  const t = useMessages();
  const { direction, many } = question;
  const dangers = rowDangers(question, answers, context);
  const set = (index: number, part: Partial<WeighedRow>) =>
    change({ rows: answers.rows.map((row, at) => (at === index ? { ...row, ...part } : row)) });
  return (
    <div className="flex flex-col gap-5">
      {answers.rows.map((row, index) => (
        <section
          key={row.ids.mass}
          aria-label={titleOf(index)}
          className={index > 0 ? 'border-t-2 border-ink pt-3' : undefined}
        >
          {answers.rows.length > 1 || direction === 'transfer' ? (
            <div className="flex items-center justify-between gap-3">
              <h3 className="type-label font-[640]">{titleOf(index)}</h3>
              {many && answers.rows.length > 1 ? (
                <Button kind="quiet" onClick={() => change({ rows: answers.rows.filter((_, at) => at !== index) })}>
                  {t('record.rows.remove')}
                </Button>
              ) : null}
            </div>
          ) : null}
          <RowFields
            question={question}
            row={row}
            index={index}
            context={context}
            limitG={limitOfRow(question, answers, context, index)}
            error={error}
            onChange={(part) => set(index, part)}
          />
          {dangers
            .filter((danger) => danger.row === index)
            .map((danger) => (
              <div key={danger.is} className="pt-3">
                <DangerWords danger={danger} />
              </div>
            ))}
        </section>
      ))}
      {many ? (
        <Button
          onClick={() =>
            change({
              rows: [...answers.rows, emptyRow(newId, (answers.rows.at(-1)?.before.unit ?? 'g') as MassUnit)],
            })
          }
        >
          {t('record.rows.add')}
        </Button>
      ) : null}
      {dangers.length > 0 ? (
        <div className="flex flex-col gap-3 border-y-2 border-ink py-3">
          <RadioLines
            legend={t('record.danger.question')}
            name="happened"
            value={answers.happened ? 'happened' : 'planned'}
            lines={[
              { value: 'planned', label: t('record.danger.planned'), detail: t('record.danger.stopped') },
              { value: 'happened', label: t('record.danger.happened') },
            ]}
            onChange={(value) => change({ happened: value === 'happened' })}
          />
          {answers.happened ? (
            <TextField
              label={t('record.reason')}
              value={answers.reason}
              maxLength={1000}
              error={error('reason')}
              onChange={(event) => change({ reason: event.target.value })}
            />
          ) : error('happened') ? (
            <FieldError>{error('happened')}</FieldError>
          ) : null}
        </div>
      ) : null}
    </div>
  );

  function titleOf(index: number): string {
    if (direction === 'transfer') return t(index === 0 ? 'record.rows.giver' : 'record.rows.taker');
    return t('record.rows.number', { number: index + 1 });
  }
}

function DangerWords({ danger }: { danger: RowDanger }) {
  const t = useMessages();
  const format = useFormat();
  const words =
    danger.is === 'overLimit'
      ? t('record.danger.overLimit', {
          tag: danger.tag,
          given: format.mass(danger.wouldHoldG),
          allowed: format.mass(danger.limitG),
        })
      : danger.is === 'otherRefrigerant'
        ? t('record.danger.otherRefrigerant', { tag: danger.tag, holds: danger.holds, comes: danger.comes })
        : danger.is === 'pressure'
          ? t('record.danger.pressure', { tag: danger.tag, comes: danger.comes })
          : danger.is === 'retest'
            ? t('record.danger.retest', { tag: danger.tag, month: format.month(danger.due.slice(0, 7)) })
            : t('record.danger.refill', { tag: danger.tag });
  return <Caution signal="danger">{words}</Caution>;
}
