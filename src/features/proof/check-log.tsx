import { useMutation } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import type { VerificationProgress, VerificationResult } from '../../../shared/proof/proof.schema.ts';
import { verifyLog } from '../../api/journal.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Failed } from '../../ui/notice.tsx';
import { isUsable, readBefore, type TypedBefore } from './known-before.tsx';
import { CheckProgress, Verdict } from './verdict.tsx';

/** The whole log, checked by the server: chain, seals, and that the tables say what the records say. */
export function CheckLog({ before }: { before: TypedBefore }) {
  const t = useMessages();
  const format = useFormat();
  const [progress, setProgress] = useState<VerificationProgress | null>(null);
  const gone = useRef<AbortController | null>(null);
  useEffect(() => () => gone.current?.abort(), []);
  const check = useMutation({
    mutationFn: () => {
      gone.current = new AbortController();
      setProgress({ checked: 0, of: 0 });
      return verifyLog(readBefore(before), setProgress, gone.current.signal);
    },
  });
  return (
    <section className="flex flex-col items-start gap-4" aria-labelledby="proof-log">
      <h2 id="proof-log" className="type-title text-[1.25rem]">
        {t('proof.log.title')}
      </h2>
      <p className="max-w-prose text-ink-soft">{t('proof.log.lead')}</p>
      <Button busy={check.isPending} disabled={!isUsable(before)} onClick={() => check.mutate()}>
        {t('proof.log.check')}
      </Button>
      <div className="w-full max-w-prose">
        {check.isPending && progress ? (
          <CheckProgress
            value={progress.checked}
            of={progress.of}
            label={t('proof.log.progress', {
              checked: format.number(progress.checked),
              of: format.number(progress.of),
            })}
          />
        ) : null}
        {check.isError ? <Failed title={t('proof.log.failed')} error={check.error} /> : null}
        {check.isSuccess ? <Result result={check.data} before={before} /> : null}
      </div>
    </section>
  );
}

function Result({ result, before }: { result: VerificationResult; before: TypedBefore }) {
  const t = useMessages();
  const format = useFormat();
  if (result.fault) {
    return (
      <Verdict intact={false}>
        <p>{result.fault.message}</p>
        <p className="text-ink-soft">{t('proof.log.whatNow')}</p>
      </Verdict>
    );
  }
  const { records, seals, sealedUpTo } = result;
  const { knownHead, keyFingerprint } = readBefore(before);
  return (
    <Verdict intact>
      <p>
        {t('proof.log.found', { records: format.number(records), seals: format.number(seals) })}{' '}
        {sealedUpTo === null ? t('proof.noSeal') : t('proof.sealedUpTo', { sequence: format.number(sealedUpTo) })}
      </p>
      {knownHead && keyFingerprint ? null : <p className="text-ink-soft">{t('proof.log.cannot')}</p>}
    </Verdict>
  );
}
