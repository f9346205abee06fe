import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { cylinderQueries } from '../../../api/cylinders.ts';
import { entryQueries } from '../../../api/entries.ts';
import { rowsOf } from '../../../api/page.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { newId } from '../../../lib/new-id.ts';
import { useRefrigerantNames } from '../../../lib/refrigerant-names.ts';
import { Button } from '../../../ui/button.tsx';
import { SelectField } from '../../../ui/field.tsx';
import { Failed, RowsSkeleton } from '../../../ui/notice.tsx';
import { QuantityInput } from '../../../ui/quantity-input.tsx';
import { type CertifiedRow, emptyCertified, emptyRow, type MassUnit } from '../answers.ts';
import type { Of } from '../question-props.ts';
import { RadioLines } from '../radio-lines.tsx';

const MASS_UNITS = ['g', 'kg', 'lb', 'oz'] as const;

/** What was sent and what was certified, for each refrigerant of the certificate. */
export function CertifiedQuestion({ answers, change, error }: Of<'certified'>) {
  const t = useMessages();
  const names = useRefrigerantNames();
  const set = (index: number, part: Partial<CertifiedRow>) =>
    change({ certified: answers.certified.map((row, at) => (at === index ? { ...row, ...part } : row)) });
  return (
    <div className="flex flex-col gap-4">
      {answers.certified.map((row, index) => (
        <section key={row.ids.entry} aria-label={t('record.certified.row', { number: index + 1 })}>
          <SelectField
            layout="row"
            label={t('record.certified.refrigerant')}
            placeholder={t('record.certified.choose')}
            choices={names.map(({ designation }) => ({ value: designation, label: designation }))}
            value={row.refrigerant}
            error={error(`certified.${index}.refrigerant`)}
            onChange={(event) => set(index, { refrigerant: event.target.value })}
          />
          <QuantityInput
            kind="mass"
            label={t('record.certified.sent')}
            units={MASS_UNITS}
            draft={row.sent}
            error={error(`certified.${index}.sent`)}
            onChange={(sent) => set(index, { sent })}
          />
          <QuantityInput
            kind="mass"
            label={t('record.certified.certified')}
            units={MASS_UNITS}
            draft={row.certified}
            error={error(`certified.${index}.certified`)}
            onChange={(certified) => set(index, { certified })}
          />
          {answers.certified.length > 1 ? (
            <Button
              kind="quiet"
              onClick={() => change({ certified: answers.certified.filter((_, at) => at !== index) })}
            >
              {t('record.certified.remove')}
            </Button>
          ) : null}
        </section>
      ))}
      <Button
        onClick={() =>
          change({
            certified: [...answers.certified, emptyCertified(newId, (answers.mass.unit ?? 'g') as MassUnit)],
          })
        }
      >
        {t('record.certified.add')}
      </Button>
    </div>
  );
}

/** Which pick-up of which cylinder the invoice is for: those that stand, newest first. */
export function PurchaseQuestion({ answers, change, error }: Of<'purchase'>) {
  const t = useMessages();
  const format = useFormat();
  const cylinders = useQuery(cylinderQueries.choice()).data?.items ?? [];
  const cylinderId = answers.rows[0]?.cylinderId ?? '';
  const purchases = useInfiniteQuery({
    ...entryQueries.list({ cylinderId, kind: 'purchase', without: 'reversed', sort: '-occurredAt' }, 20),
    enabled: cylinderId !== '',
  });
  const rows = (purchases.data ? rowsOf(purchases.data) : []).filter(
    ({ addedByServer, from }) => !addedByServer && from.place === 'supplier',
  );
  return (
    <div className="flex flex-col gap-2">
      <SelectField
        layout="row"
        label={t('record.rows.cylinder')}
        placeholder={t('record.rows.choose')}
        choices={cylinders.map((cylinder) => ({
          value: cylinder.id,
          label: t('record.rows.option', {
            tag: cylinder.tag,
            refrigerant: cylinder.refrigerant,
            mass: format.mass(cylinder.contentG),
          }),
        }))}
        value={cylinderId}
        error={error('rows.0.cylinderId')}
        onChange={(event) =>
          change({
            rows: [{ ...(answers.rows[0] ?? emptyRow(newId, 'g')), cylinderId: event.target.value }],
            aboutGroupId: '',
          })
        }
      />
      {cylinderId && purchases.isPending ? <RowsSkeleton rows={2} /> : null}
      {purchases.isError ? <Failed error={purchases.error} onRetry={() => void purchases.refetch()} /> : null}
      {purchases.isSuccess && rows.length === 0 ? (
        <p className="py-2 text-ink-soft">{t('record.purchase.none')}</p>
      ) : null}
      {rows.length > 0 ? (
        <RadioLines
          legend={t('record.purchase.which')}
          name="purchase"
          value={answers.aboutGroupId}
          lines={rows.map((row) => ({
            value: row.groupId,
            label: `${format.mass(row.massG)}, ${row.from.label}`,
            detail: t(row.howKnown === 'invoice' ? 'record.purchase.byInvoice' : 'record.purchase.byLabel', {
              at: format.longDateTime(row.occurredAt),
            }),
          }))}
          error={error('aboutGroupId')}
          onChange={(aboutGroupId) => change({ aboutGroupId })}
        />
      ) : error('aboutGroupId') ? (
        <p role="alert" className="border-l-4 border-ink pl-2.5 font-[600]">
          {error('aboutGroupId')}
        </p>
      ) : null}
    </div>
  );
}
