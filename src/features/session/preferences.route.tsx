import { useSession, useUpdateMe } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { changePreferences, preferencesFor, usePreferences } from '../../lib/preferences.ts';
import { SelectField } from '../../ui/field.tsx';
import { Done, Failed } from '../../ui/notice.tsx';
import { ChangePassword } from './change-password.tsx';
import { type Preferences, preferenceChoices } from './preference-choices.ts';
import { SessionPage } from './session-page.tsx';

export async function loader() {
  await loadMessages('session');
  return null;
}

/** Language, light and units: at once on this device, and with the person when somebody is signed in. */
export function Component() {
  const t = useMessages();
  const session = useSession();
  const preferences = usePreferences();
  const update = useUpdateMe();
  const change = (part: Partial<Preferences>) => {
    changePreferences(part);
    if (session) update.mutate({ preferences: part });
  };
  return (
    <SessionPage
      title={t('session.preferences.title')}
      lead={t(session ? 'session.preferences.lead' : 'session.preferences.leadSignedOut')}
    >
      <div className="flex flex-col">
        {preferenceChoices(t).map(({ name, label, choices }) => (
          <SelectField
            key={name}
            layout="row"
            label={label}
            choices={choices}
            value={preferences[name]}
            onChange={(event) => {
              const value = event.target.value;
              // A new region brings its usual units along; each can still be chosen apart.
              if (name === 'locale') {
                const { theme: _theme, ...usual } = preferencesFor(value as Preferences['locale']);
                const sameRegion = value.slice(-2) === preferences.locale.slice(-2);
                change(sameRegion ? { locale: usual.locale } : usual);
              } else change({ [name]: value });
            }}
          />
        ))}
      </div>
      {update.isError ? <Failed title={t('session.preferences.notSaved')} error={update.error} /> : null}
      {update.isSuccess ? <Done>{t('session.preferences.saved')}</Done> : null}
      {session ? <ChangePassword /> : null}
    </SessionPage>
  );
}
