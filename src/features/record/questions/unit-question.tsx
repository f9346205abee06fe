import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { jobQueries } from '../../../api/jobs.ts';
import { rowsOf } from '../../../api/page.ts';
import { unitQueries } from '../../../api/units.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Button } from '../../../ui/button.tsx';
import { FieldError, SelectField, TextField } from '../../../ui/field.tsx';
import { RowsSkeleton } from '../../../ui/notice.tsx';
import type { Of } from '../question-props.ts';
import { RadioLines } from '../radio-lines.tsx';

/** Enough to choose from by thumb; more are found by a word. */
const SHOWN = 8;

/** Which unit, and for which of its jobs: what the same job took out is counted against what it puts in. */
export function UnitQuestion({ answers, context, change, error }: Of<'unit'>) {
  const t = useMessages();
  const format = useFormat();
  const { unit } = context;
  const jobs = useQuery(jobQueries.openOf(answers.unitId)).data ?? [];
  if (!answers.unitId) return <FindUnit onFound={(unitId) => change({ unitId })} error={error('unitId')} />;
  if (!unit) return <RowsSkeleton rows={1} />;
  return (
    <div className="flex flex-col gap-2">
      <div className="flex items-start justify-between gap-4 border-y border-rule py-2.5">
        <p className="leading-snug">
          <strong className="font-[650]">
            {t('record.unit.named', { tag: unit.tag, refrigerant: unit.refrigerant })}
          </strong>
          <span className="block text-[0.9375rem] text-ink-soft">
            {t(unit.book.known ? 'record.unit.book' : 'record.unit.bookNotKnown', {
              mass: format.mass(unit.book.massG),
            })}
            {unit.fullCharge ? ` ${t('record.unit.full', { mass: format.mass(unit.fullCharge.massG) })}` : ''}
          </span>
        </p>
        <Button kind="quiet" className="shrink-0" onClick={() => change({ unitId: '', jobId: '' })}>
          {t('record.unit.other')}
        </Button>
      </div>
      {error('unitId') ? <FieldError>{error('unitId')}</FieldError> : null}
      {jobs.length > 0 ? (
        <SelectField
          layout="row"
          label={t('record.job')}
          hint={t('record.job.hint')}
          placeholder={t('record.job.none')}
          choices={jobs.map((job) => ({
            value: job.id,
            label: [job.title ?? t(`record.jobKind.${job.kind}`), format.day(job.openedAt.slice(0, 10))].join(', '),
          }))}
          value={answers.jobId}
          onChange={(event) => change({ jobId: event.target.value })}
        />
      ) : null}
    </div>
  );
}

function FindUnit({ onFound, error }: { onFound: (unitId: string) => void; error: string | undefined }) {
  const t = useMessages();
  const [search, setSearch] = useState('');
  const units = useInfiniteQuery(unitQueries.list(search.trim() ? { search: search.trim() } : {}, SHOWN));
  const found = units.data ? rowsOf(units.data).slice(0, SHOWN) : [];
  return (
    <div className="flex flex-col gap-2">
      <TextField
        type="search"
        label={t('record.unit.find')}
        hint={t('record.unit.findHint')}
        value={search}
        error={error}
        onChange={(event) => setSearch(event.target.value)}
      />
      {units.isPending ? <RowsSkeleton rows={3} /> : null}
      {units.isSuccess && found.length === 0 ? (
        <p className="py-3 text-ink-soft">{t('record.unit.noneFound')}</p>
      ) : null}
      <RadioLines
        legend={t('record.ask.unit')}
        hideLegend
        name="unit"
        value=""
        lines={found.map((unit) => ({
          value: unit.id,
          label: t('record.unit.named', { tag: unit.tag, refrigerant: unit.refrigerant }),
          detail: `${unit.name}, ${unit.siteName}`,
        }))}
        onChange={onFound}
      />
    </div>
  );
}
