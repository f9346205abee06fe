import { useState } from 'react';
import {
  type CheckImportRequest,
  checkImportRequest,
  DATE_ORDERS,
  DECIMALS,
  type ImportView,
} from '../../../shared/imports/import.schema.ts';
import { STORED_MASS_UNITS } from '../../../shared/units/stored-mass.ts';
import { answerErrors, errorAt, errorsElsewhere, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { isAtWork, useCheckImport } from '../../api/imports.ts';
import { useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError, SelectField, TextField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { Outcome } from './outcome.tsx';

const DELIMITER_WORDS: Readonly<Record<string, string>> = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'bar' };

/** What the file was understood as, which column is which, how its cells are read; then the check and what came of it. */
export function MapColumns({ file }: { file: ImportView }) {
  const t = useMessages();
  const { locale, mass } = usePreferences();
  const check = useCheckImport(file.id);
  const [errors, setErrors] = useState<FormError[]>([]);
  const [draft, setDraft] = useDraft<CheckImportRequest>(`import.${file.id}`, () => ({
    columns: Object.fromEntries(file.fields.flatMap(({ name, guess }) => (guess === null ? [] : [[name, guess]]))),
    massUnit: mass === 'lbOz' ? 'lb' : mass,
    decimal: file.read.decimal,
    dateOrder: locale === 'en-US' || locale === 'es-US' ? 'mdy' : 'dmy',
    since: `${deviceNow().getFullYear()}-01-01`,
  }));
  const set = (change: Partial<CheckImportRequest>) => setDraft((now) => ({ ...now, ...change }));
  const setColumn = (name: string, value: string) =>
    setDraft((now) => {
      const { [name]: _, ...others } = now.columns;
      return { ...now, columns: value === '' ? others : { ...others, [name]: Number(value) } };
    });
  const atWork = isAtWork(file);
  const send = () => {
    const missing = file.fields
      .filter(({ name, required }) => required && draft.columns[name] === undefined)
      .map(({ name }) => ({
        pointer: `/columns/${name}`,
        code: 'importColumnNeeded',
        message: t('problem.importColumnNeeded'),
      }));
    const found = [...missing, ...schemaErrors(checkImportRequest, draft)];
    setErrors(found);
    if (found.length > 0) return;
    check.mutate(draft, { onError: (error) => setErrors(answerErrors(error)) });
  };
  // Nothing is left to choose.
  if (file.state === 'done') {
    return (
      <div className="flex flex-col gap-6">
        <Understood file={file} />
        <Outcome file={file} />
      </div>
    );
  }
  const shown = ['/since', ...file.fields.map(({ name }) => `/columns/${name}`)];
  return (
    <div className="grid gap-x-12 gap-y-8 lg:grid-cols-[minmax(0,30rem)_minmax(0,1fr)]">
      <form
        noValidate
        className="flex flex-col gap-5"
        onSubmit={(event) => {
          event.preventDefault();
          send();
        }}
      >
        <Understood file={file} />
        <fieldset disabled={atWork} className="min-w-0">
          <legend className="type-title pb-1 text-[1.25rem]">{t('imports.columns')}</legend>
          <div className="border-t border-rule">
            {file.fields.map(({ name, required }) => {
              const column = draft.columns[name];
              const samples = column === undefined ? [] : (file.columns[column]?.samples ?? []);
              return (
                <SelectField
                  key={name}
                  layout="row"
                  label={
                    <>
                      {t(`imports.field.${name}`)}
                      {required ? ` (${t('imports.needed')})` : ''}
                    </>
                  }
                  hint={samples.length > 0 ? t('imports.sample', { samples: samples.join(' · ') }) : undefined}
                  placeholder={t('imports.noColumn')}
                  choices={file.columns.map(({ head }, at) => ({ value: String(at), label: head }))}
                  value={column === undefined ? '' : String(column)}
                  error={errorAt(errors, `/columns/${name}`)}
                  onChange={(event) => setColumn(name, event.target.value)}
                />
              );
            })}
          </div>
        </fieldset>
        <fieldset disabled={atWork} className="min-w-0">
          <legend className="type-title pb-1 text-[1.25rem]">{t('imports.how')}</legend>
          <SelectField
            layout="row"
            label={t('imports.massUnit')}
            choices={STORED_MASS_UNITS.map((unit) => ({ value: unit, label: unit }))}
            value={draft.massUnit}
            onChange={(event) => set({ massUnit: event.target.value as 'kg' })}
          />
          <SelectField
            layout="row"
            label={t('imports.decimal')}
            choices={DECIMALS.map((value) => ({ value, label: t(`imports.decimal.${value}`) }))}
            value={draft.decimal}
            onChange={(event) => set({ decimal: event.target.value as 'point' })}
          />
          <SelectField
            layout="row"
            label={t('imports.dateOrder')}
            choices={DATE_ORDERS.map((value) => ({ value, label: t(`imports.dateOrder.${value}`) }))}
            value={draft.dateOrder}
            onChange={(event) => set({ dateOrder: event.target.value as 'dmy' })}
          />
          {file.kind === 'entries' ? null : (
            <TextField
              layout="row"
              type="date"
              label={t('imports.since')}
              value={draft.since}
              error={errorAt(errors, '/since') ? t('imports.sinceNeeded') : undefined}
              onChange={(event) => set({ since: event.target.value })}
            />
          )}
        </fieldset>
        {errorsElsewhere(errors, shown).map((message) => (
          <FieldError key={message}>{message}</FieldError>
        ))}
        <Button
          kind={file.state === 'checked' && file.wrongRows === 0 ? 'plain' : 'act'}
          wide
          type="submit"
          busy={atWork || check.isPending}
        >
          {t(file.state === 'read' ? 'imports.check' : 'imports.checkAgain')}
        </Button>
      </form>
      <Outcome file={file} />
    </div>
  );
}

function Understood({ file: { read, fileName } }: { file: ImportView }) {
  const t = useMessages();
  const format = useFormat();
  const { encoding, delimiter, sheet, rows } = read;
  return (
    <Notice title={fileName}>
      <p>
        {read.format === 'xlsx'
          ? t('imports.understood.xlsx', { sheet: sheet ?? '', rows })
          : t('imports.understood.csv', {
              encoding: (encoding ?? '').toUpperCase().replace('WINDOWS', 'Windows'),
              delimiter: t(`imports.delimiter.${DELIMITER_WORDS[delimiter ?? ','] ?? 'comma'}`),
              rows,
            })}
      </p>
      {read.formulas > 0 ? <p lang={format.locale}>{t('imports.formulas', { count: read.formulas })}</p> : null}
    </Notice>
  );
}
