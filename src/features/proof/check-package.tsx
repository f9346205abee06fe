import { useMutation } from '@tanstack/react-query';
import { type DragEvent, useState } from 'react';
import { type CheckedPackage, checkPackage, Fault, grouped, openZip } from '../../../shared/proof/verify.mjs';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Failed } from '../../ui/notice.tsx';
import { isUsable, readBefore, type TypedBefore } from './known-before.tsx';
import { CheckProgress, Verdict } from './verdict.tsx';

/** The verifier's own checks, here in the browser: the file is not sent anywhere. */
export function CheckPackage({ before }: { before: TypedBefore }) {
  const t = useMessages();
  const [read, setRead] = useState(0);
  const [over, setOver] = useState(false);
  const check = useMutation({
    mutationFn: async (file: File) => {
      setRead(0);
      const { browserTools, sourceOfFile } = await import('./browser-tools.ts');
      const files = await openZip(sourceOfFile(file, setRead), browserTools);
      return checkPackage(files, browserTools, readBefore(before));
    },
  });
  const take = (files: FileList | null) => {
    const file = files?.[0];
    if (file && isUsable(before)) check.mutate(file);
  };
  const drop = (event: DragEvent) => {
    event.preventDefault();
    setOver(false);
    take(event.dataTransfer.files);
  };
  const file = check.variables;
  return (
    <section className="flex flex-col gap-4" aria-labelledby="proof-package">
      <h2 id="proof-package" className="type-title text-[1.25rem]">
        {t('proof.package.title')}
      </h2>
      <p className="max-w-prose text-ink-soft">{t('proof.package.lead')}</p>
      <label
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDragLeave={() => setOver(false)}
        onDrop={drop}
        className={`relative flex min-h-24 max-w-prose items-center justify-center border-2 border-dashed px-5 py-4 text-center has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-ink ${over ? 'border-rest bg-rest-wash' : 'border-edge bg-sheet hover:border-ink'}`}
      >
        <input
          type="file"
          accept=".zip,application/zip"
          className="absolute inset-0 cursor-pointer opacity-0"
          onChange={(event) => {
            take(event.target.files);
            event.target.value = ''; // the same file may be checked again, with a head this time
          }}
        />
        <span className="font-[600]">{t('proof.package.drop')}</span>
      </label>
      <div className="max-w-prose">
        {check.isPending && file ? (
          <CheckProgress value={read} of={file.size} label={t('proof.package.progress', { file: file.name })} />
        ) : null}
        {check.isSuccess ? <Result found={check.data} /> : null}
        {check.isError && check.error instanceof Fault ? (
          <Verdict intact={false}>
            <p>
              {t(`proof.fault.${check.error.code}`, { ...check.error.values, sequence: check.error.sequence ?? '?' })}
            </p>
          </Verdict>
        ) : null}
        {check.isError && !(check.error instanceof Fault) ? (
          <Failed title={t('proof.package.failed')} error={check.error} />
        ) : null}
      </div>
    </section>
  );
}

function Result({ found }: { found: CheckedPackage }) {
  const t = useMessages();
  const format = useFormat();
  const { proof, records, whole, words, erased, sealed, seals, signer, end, unsignedKeys } = found;
  return (
    <Verdict intact>
      <p className="font-[600]">
        {proof.firmName}: {proof.about.label}
      </p>
      <p>
        {t('proof.package.counts', { records: format.number(records), whole: format.number(whole) })}{' '}
        {words + erased > 0 ? t('proof.package.words', { words, erased }) : ''}
      </p>
      <p>
        {t('proof.package.sealed', {
          sequence: format.number(sealed.sequence),
          at: format.longDateTime(sealed.at, 'UTC'),
          seals: format.number(seals),
        })}
      </p>
      <p>
        {t('proof.key')}: <span className="font-mono text-[0.875rem] wrap-anywhere">{grouped(sealed.keyId)}</span>
      </p>
      <p className="type-label mt-2">{t('proof.package.cannot')}</p>
      <ul className="list-disc pl-5 text-ink-soft">
        {signer === 'checked' ? null : <li>{t('proof.package.signer')}</li>}
        {end === 'checked' ? null : <li>{t('proof.package.end')}</li>}
        {unsignedKeys.map((record) => (
          <li key={record}>{t('proof.package.unsigned', { record })}</li>
        ))}
        <li>{t('proof.package.truth')}</li>
      </ul>
    </Verdict>
  );
}
