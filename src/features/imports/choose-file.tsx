import { useId, useState } from 'react';
import { IMPORT_LIMITS, type ImportView, sizesInMegabytes } from '../../../shared/imports/import.schema.ts';
import { IMPORT_KINDS, type ImportKind } from '../../../shared/imports/import-fields.ts';
import { answerErrors } from '../../api/form-errors.ts';
import { useReadFile } from '../../api/imports.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { ChoiceField, FieldError } from '../../ui/field.tsx';

/** What the table holds, and the file. */
export function ChooseFile({ onRead }: { onRead: (view: ImportView) => void }) {
  const t = useMessages();
  const read = useReadFile();
  const id = useId();
  const [kind, setKind] = useState<ImportKind>('units');
  const [file, setFile] = useState<File | null>(null);
  const [missing, setMissing] = useState(false);
  // Said before it has travelled, and by the server again.
  const tooLarge = file !== null && file.size > IMPORT_LIMITS.fileBytes;
  const errors = read.isError ? answerErrors(read.error) : [];
  return (
    <form
      noValidate
      className="flex max-w-2xl flex-col gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        setMissing(file === null);
        if (file && !tooLarge) read.mutate({ kind, file }, { onSuccess: onRead });
      }}
    >
      <ChoiceField
        label={t('imports.kind')}
        name="import-kind"
        value={kind}
        choices={IMPORT_KINDS.map((value) => ({ value, label: t(`imports.kind.${value}`) }))}
        onChange={(value) => setKind(value as ImportKind)}
      />
      <div className="flex flex-col gap-1">
        <label htmlFor={id} className="type-label text-ink-soft">
          {t('imports.file')}
        </label>
        <input
          id={id}
          type="file"
          accept=".csv,.tsv,.txt,.xlsx,text/csv,application/vnd.openxmlformats-officedocument.spreadsheetml.sheet"
          aria-describedby={`${id}-hint`}
          className="min-h-14 w-full border-b-2 border-edge bg-sheet p-3 file:mr-4 file:border-0 file:bg-transparent file:font-[600] file:text-rest"
          onChange={(event) => {
            setFile(event.target.files?.[0] ?? null);
            setMissing(false);
            read.reset();
          }}
        />
        <p id={`${id}-hint`} className="type-label text-[0.9375rem] text-ink-soft">
          {t('imports.fileHint')}
        </p>
        {missing ? <FieldError>{t('imports.fileNeeded')}</FieldError> : null}
        {tooLarge ? <FieldError>{t('problem.importTooLarge', sizesInMegabytes(file.size))}</FieldError> : null}
        {errors.map(({ message }) => (
          <FieldError key={message}>{message}</FieldError>
        ))}
      </div>
      <Button kind="act" wide type="submit" busy={read.isPending}>
        {t('imports.read')}
      </Button>
    </form>
  );
}
