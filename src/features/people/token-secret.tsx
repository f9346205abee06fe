import { useRef, useState } from 'react';
import type { z } from 'zod';
import type { createdToken } from '../../../shared/people/people.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Caution } from '../../ui/caution.tsx';
import { Done } from '../../ui/notice.tsx';

/** The secret, once. It is copied by a button or by hand; closing ends the chance. */
export function TokenSecret({ token, onClose }: { token: z.output<typeof createdToken>; onClose: () => void }) {
  const t = useMessages();
  const field = useRef<HTMLTextAreaElement>(null);
  const [copied, setCopied] = useState<boolean | null>(null);
  const copy = async () => {
    try {
      await navigator.clipboard.writeText(token.secret);
      setCopied(true);
    } catch {
      // Without leave to write to the clipboard the text is marked, so that one key copies it.
      field.current?.select();
      setCopied(false);
    }
  };
  return (
    <div className="flex flex-col gap-4">
      <Caution signal="notice">{t('people.secretOnce')}</Caution>
      <label className="flex flex-col gap-1">
        <span className="type-label text-ink-soft">{t('people.secretOf', { name: token.name })}</span>
        <textarea
          ref={field}
          readOnly
          rows={3}
          value={token.secret}
          onFocus={(event) => event.target.select()}
          className="w-full resize-none break-all border-b-2 border-edge bg-sheet p-3 font-mono text-[0.9375rem]"
        />
      </label>
      <div aria-live="polite">
        {copied === true ? (
          <Done>{t('people.copied')}</Done>
        ) : copied === false ? (
          <p>{t('people.copyByHand')}</p>
        ) : null}
      </div>
      <Button kind="act" wide onClick={() => void copy()}>
        {t('people.copy')}
      </Button>
      <Button onClick={onClose}>{t('people.secretKept')}</Button>
    </div>
  );
}
