import { useState } from 'react';
import type { z } from 'zod';
import {
  type createExportRequest,
  EXPORT_DOCUMENTS,
  EXPORT_TABLES,
  type ExportWhat,
} from '../../../shared/exports/export.schema.ts';
import { useStartExport } from '../../api/exports.ts';
import { usePermission } from '../../api/session.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { Button } from '../../ui/button.tsx';
import { SelectField, TextField } from '../../ui/field.tsx';
import { Failed } from '../../ui/notice.tsx';
import { filterWords } from './filter-words.ts';

interface Asked {
  what: string;
  format: string | null;
  filters: Record<string, string>;
}

/** Papers of one unit, cylinder or job are asked for on its own page, which says which one. */
const REPORTS: readonly ExportWhat[] = ['periodReport', 'disposalReport'];
const isWhat = (what: string): what is ExportWhat =>
  ([...EXPORT_TABLES, ...EXPORT_DOCUMENTS] as readonly string[]).includes(what);
const PERIODS: readonly ExportWhat[] = [...REPORTS, 'cylinderStatement'];
const isDocument = (what: ExportWhat): boolean => (EXPORT_DOCUMENTS as readonly string[]).includes(what);

/** One export: what, as which file, which months. Filters of the list that led here stand in words before it is begun. */
export function NewExport({ asked, onStarted }: { asked: Asked | null; onStarted: () => void }) {
  const t = useMessages();
  const makes = usePermission('exports:make');
  const start = useStartExport();
  const [id, setId] = useState(newId);
  const [what, setWhat] = useState<ExportWhat>(asked && isWhat(asked.what) ? asked.what : 'entries');
  const [format, setFormat] = useState(asked?.format === 'xlsx' ? 'xlsx' : 'csv');
  const thisMonth = toDayInput(deviceNow()).slice(0, 7);
  const carried = asked && asked.what === what ? withoutPeriod(what, asked.filters) : {};
  const [months, setMonths] = useState(() => spanOf(asked, /^\d{4}-\d{2}$/, { from: thisMonth, to: thisMonth }));
  const [days, setDays] = useState(() =>
    spanOf(asked, /^\d{4}-\d{2}-\d{2}$/, { from: `${thisMonth}-01`, to: toDayInput(deviceNow()) }),
  );
  const choices: readonly ExportWhat[] = makes ? [...EXPORT_TABLES, ...REPORTS] : [];
  const shown = choices.includes(what) ? choices : [what, ...choices];
  if (!makes && asked === null) return null;
  const said = Object.entries(carried).flatMap(([name, value]) => filterWords(t, what, name, value));
  const again = () => {
    start.reset();
    setId(newId());
  };
  const changing = (set: (span: Span) => void) => (span: Span) => {
    set(span);
    again();
  };
  const send = () => {
    const period = REPORTS.includes(what) ? months : what === 'cylinderStatement' ? days : {};
    const request = { id, what, format: isDocument(what) ? 'pdf' : format, filters: { ...period, ...carried } };
    start.mutate(request as z.input<typeof createExportRequest>, {
      onSuccess: () => {
        setId(newId());
        onStarted();
      },
    });
  };
  return (
    <section aria-label={t('exports.new')} className="flex max-w-3xl flex-col gap-4 border-t border-rule pt-3">
      <div className="grid items-end gap-4 tablet:grid-cols-2 desk:grid-cols-3">
        <SelectField
          label={t('exports.what')}
          value={what}
          choices={shown.map((value) => ({ value, label: t(`exports.what.${value}`) }))}
          onChange={({ target }) => {
            setWhat(target.value as ExportWhat);
            again();
          }}
        />
        {isDocument(what) ? null : (
          <SelectField
            label={t('exports.format')}
            value={format}
            choices={[
              { value: 'csv', label: t('exports.format.csv') },
              { value: 'xlsx', label: t('exports.format.xlsx') },
            ]}
            onChange={({ target }) => {
              setFormat(target.value);
              again();
            }}
          />
        )}
        {REPORTS.includes(what) ? <Period type="month" value={months} onChange={changing(setMonths)} /> : null}
        {what === 'cylinderStatement' ? <Period type="date" value={days} onChange={changing(setDays)} /> : null}
      </div>
      {said.length > 0 ? <p className="text-ink-soft">{t('exports.filtered', { filters: said.join(', ') })}</p> : null}
      {start.isError ? <Failed title={t('exports.notStarted')} error={start.error} /> : null}
      <div>
        <Button kind="act" busy={start.isPending} onClick={send}>
          {t('exports.start')}
        </Button>
      </div>
    </section>
  );
}

/** Its fields show the period, and what they show is what is sent. */
function withoutPeriod(what: ExportWhat, filters: Record<string, string>): Record<string, string> {
  if (!PERIODS.includes(what)) return filters;
  return Object.fromEntries(Object.entries(filters).filter(([name]) => name !== 'from' && name !== 'to'));
}

function spanOf(asked: Asked | null, form: RegExp, usual: Span): Span {
  const { from = '', to = '' } = asked?.filters ?? {};
  return form.test(from) && form.test(to) ? { from, to } : usual;
}

interface Span {
  from: string;
  to: string;
}

function Period({ type, value, onChange }: { type: 'month' | 'date'; value: Span; onChange: (value: Span) => void }) {
  const t = useMessages();
  return (
    <>
      <TextField
        type={type}
        label={t('exports.from')}
        value={value.from}
        onChange={({ target }) => onChange({ ...value, from: target.value })}
      />
      <TextField
        type={type}
        label={t('exports.to')}
        value={value.to}
        onChange={({ target }) => onChange({ ...value, to: target.value })}
      />
    </>
  );
}
