import { readHash, readHead } from '../../../shared/proof/verify.mjs';
import { useMessages } from '../../lib/messages.ts';
import { Disclosure } from '../../ui/disclosure.tsx';
import { TextField } from '../../ui/field.tsx';

/** What somebody holds from an earlier mail or print, as typed. */
export interface TypedBefore {
  head: string;
  fingerprint: string;
}
export const NOTHING_BEFORE: TypedBefore = { head: '', fingerprint: '' };

const isWrong = {
  head: (text: string) => readHead(text) === null,
  fingerprint: (text: string) => readHash(text) === null,
};
export const isUsable = (typed: TypedBefore): boolean =>
  (['head', 'fingerprint'] as const).every((name) => typed[name].trim() === '' || !isWrong[name](typed[name]));

export const readBefore = ({ head, fingerprint }: TypedBefore) => ({
  knownHead: readHead(head) ?? undefined,
  keyFingerprint: readHash(fingerprint) ?? undefined,
});

/** Head and fingerprint: without them nobody can tell who signed, nor whether the end is there. */
export function KnownBefore({ value, onChange }: { value: TypedBefore; onChange: (value: TypedBefore) => void }) {
  const t = useMessages();
  const field = (name: keyof TypedBefore) => {
    const wrong = value[name].trim() !== '' && isWrong[name](value[name]);
    return (
      <TextField
        label={t(`proof.before.${name}`)}
        hint={t(`proof.before.${name}Hint`)}
        error={wrong ? t(`proof.before.${name}Wrong`) : undefined}
        value={value[name]}
        onChange={(event) => onChange({ ...value, [name]: event.target.value })}
        autoComplete="off"
        spellCheck={false}
        className="font-mono"
      />
    );
  };
  const given = (['head', 'fingerprint'] as const).filter((name) => value[name].trim() !== '').length;
  return (
    <Disclosure title={t('proof.before.title')} summary={t(given === 0 ? 'proof.before.none' : 'proof.before.given')}>
      <div className="flex flex-col gap-4 pt-1">
        <p className="text-ink-soft">{t('proof.before.lead')}</p>
        {field('head')}
        {field('fingerprint')}
      </div>
    </Disclosure>
  );
}
