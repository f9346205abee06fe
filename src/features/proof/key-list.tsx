import { useState } from 'react';
import { type SealKeys, useChangeKey } from '../../api/journal.ts';
import { usePermission } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Dialog } from '../../ui/dialog.tsx';
import { Disclosure } from '../../ui/disclosure.tsx';
import { Done, Failed, Notice } from '../../ui/notice.tsx';
import { Code } from './chain-state.tsx';

/** Public keys, newest first, and their replacement by an owner. */
export function KeyList({ keys }: { keys: SealKeys }) {
  const t = useMessages();
  const format = useFormat();
  const isOwner = usePermission('seals:make');
  const [asking, setAsking] = useState(false);
  const change = useChangeKey();
  const current = keys.items[0] ?? null;
  return (
    <section className="flex flex-col gap-3" aria-labelledby="proof-keys">
      <h2 id="proof-keys" className="type-title text-[1.25rem]">
        {t('proof.keys.title')}
      </h2>
      <p className="max-w-prose text-ink-soft">{t('proof.keys.lead')}</p>
      {keys.held ? null : <Notice title={t('proof.keys.lost')}>{t('proof.keys.lostText')}</Notice>}
      {keys.items.length === 0 ? <p>{t('proof.noKey')}</p> : null}
      <ul className="border-t border-rule">
        {keys.items.map((key, index) => (
          <li key={key.keyId} className="pt-3">
            <p className="font-[600]">
              {t(index === 0 ? 'proof.keys.current' : 'proof.keys.earlier', {
                at: format.longDateTime(key.at),
                by: key.by?.name ?? t('proof.theProgram'),
                record: format.number(key.record),
              })}
            </p>
            <p>
              <Code>{key.fingerprint}</Code>
            </p>
            <p className="type-label text-ink-soft">{t(`proof.keys.signed.${key.signed}`)}</p>
            <Disclosure title={<span className="type-label">{t('proof.keys.pem')}</span>}>
              <pre className="overflow-x-auto font-mono text-[0.8125rem] whitespace-pre">{key.publicKeyPem}</pre>
            </Disclosure>
          </li>
        ))}
      </ul>
      {change.isSuccess ? <Done>{t('proof.keys.changed')}</Done> : null}
      {isOwner && current ? (
        <Button className="self-start" onClick={() => setAsking(true)}>
          {t('proof.keys.change')}
        </Button>
      ) : null}
      {current ? (
        <Dialog
          open={asking}
          onClose={() => setAsking(false)}
          title={t('proof.keys.changeTitle')}
          actions={
            <>
              <Button
                kind="grave"
                busy={change.isPending}
                onClick={() =>
                  change.mutate(
                    { currentKeyId: current.keyId, currentKeyLost: !keys.held },
                    { onSuccess: () => setAsking(false) },
                  )
                }
              >
                {t(keys.held ? 'proof.keys.changeDo' : 'proof.keys.changeUnsigned')}
              </Button>
              <Button onClick={() => setAsking(false)}>{t('proof.keys.changeNot')}</Button>
            </>
          }
        >
          <div className="flex flex-col gap-3">
            <p>{t('proof.keys.changeText')}</p>
            {keys.held ? null : <Notice>{t('proof.keys.changeLost')}</Notice>}
            {change.isError ? <Failed title={t('proof.keys.notChanged')} error={change.error} /> : null}
          </div>
        </Dialog>
      ) : null}
    </section>
  );
}
