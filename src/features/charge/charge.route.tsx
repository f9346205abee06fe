import { useCallback, useEffect, useMemo } from 'react';
import { Link } from 'react-router-dom';
import { useSession } from '../../api/session.ts';
import { useDraft } from '../../lib/draft.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { type ChargeDraft, emptyDraft, fieldUnits, isUntouched } from './charge-draft.ts';
import { ChargePage } from './charge-page.tsx';
import { exampleDraft } from './example-draft.ts';
import { usualGwpSet } from './usual-gwp-set.ts';

export async function loader() {
  await loadMessages('charge-screen', 'charge');
  return null;
}

/** Rows have keys of their own, made anew each time. */
const told = (draft: ChargeDraft) => JSON.stringify(draft, (name, value) => (name === 'key' ? undefined : value));

/** The calculator: it needs no sign-in and stores nothing. */
export function Component() {
  const t = useMessages();
  const preferences = usePreferences();
  const session = useSession();
  const gwpSet = session?.firm.gwpSet ?? usualGwpSet(preferences.locale);
  const units = useMemo(() => fieldUnits(preferences), [preferences]);
  const initial = useCallback(() => emptyDraft(units, gwpSet), [units, gwpSet]);
  const [draft, setDraft, clear] = useDraft<ChargeDraft>('charge', initial);
  // A session that arrives after the empty form brings its person's units and its firm's GWP values; what was begun
  // keeps its own.
  useEffect(() => {
    setDraft((now) => {
      const fresh = emptyDraft(units, gwpSet);
      return isUntouched(now) && told(now) !== told(fresh) ? fresh : now;
    });
  }, [units, gwpSet, setDraft]);
  return (
    <ChargePage
      title={t('chargeScreen.title')}
      draft={draft}
      change={setDraft}
      onExample={() => setDraft(exampleDraft(units, gwpSet, preferences.locale))}
      foot={
        <div className="flex flex-col items-start gap-2">
          <p className="text-[0.9375rem] text-ink-soft">
            {session ? <Link to="/units">{t('chargeScreen.keepInUnit')}</Link> : t('chargeScreen.nothingStored')}
          </p>
          <Button onClick={clear}>{t('chargeScreen.startOver')}</Button>
        </div>
      }
    />
  );
}
