import type { JournalState } from '../../../shared/proof/proof.schema.ts';
import { grouped } from '../../../shared/proof/verify.mjs';
import { useSealNow } from '../../api/journal.ts';
import { usePermission } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Fact, Facts } from '../../ui/facts.tsx';
import { Done, Failed } from '../../ui/notice.tsx';

/** Long hashes break where the line ends, and nowhere else. */
export function Code({ children }: { children: string }) {
  return <span className="font-mono text-[0.8125rem] leading-normal wrap-anywhere">{children}</span>;
}

/** Where the chain stands: its head, its last seal, and what that does not cover yet. */
export function ChainState({ state }: { state: JournalState }) {
  const t = useMessages();
  const format = useFormat();
  const isOwner = usePermission('seals:make');
  const seal = useSealNow();
  const { head, lastSeal, unsealed, keyId, verifierSha256 } = state;
  return (
    <section className="flex flex-col gap-4" aria-label={t('proof.state')}>
      <Facts>
        <Fact name={t('proof.records')}>
          <p className="type-title text-[1.5rem]">{format.number(head.sequence)}</p>
          {head.sequence > 0 ? <Code>{`${head.sequence}:${head.hash}`}</Code> : null}
        </Fact>
        <Fact name={t('proof.lastSeal')}>
          {lastSeal
            ? t('proof.sealedAt', {
                sequence: format.number(lastSeal.sequence),
                at: format.longDateTime(lastSeal.at),
                by: lastSeal.by?.name ?? t('proof.theProgram'),
              })
            : t('proof.noSeal')}
        </Fact>
        <Fact name={t('proof.unsealed')}>
          {unsealed === 0 ? t('proof.nothingUnsealed') : t('proof.unsealedCount', { count: unsealed })}
        </Fact>
        <Fact name={t('proof.key')}>{keyId ? <Code>{grouped(keyId)}</Code> : t('proof.noKey')}</Fact>
        <Fact name={t('proof.verifier')}>
          <Code>{verifierSha256}</Code>
        </Fact>
      </Facts>
      {isOwner ? (
        <div className="flex flex-col items-start gap-3">
          <Button busy={seal.isPending} disabled={unsealed === 0} onClick={() => seal.mutate()}>
            {t('proof.sealNow')}
          </Button>
          {seal.isError ? <Failed title={t('proof.notSealed')} error={seal.error} /> : null}
          {seal.isSuccess ? <Done>{t('proof.sealedNow', { sequence: format.number(seal.data.sequence) })}</Done> : null}
        </div>
      ) : null}
    </section>
  );
}
