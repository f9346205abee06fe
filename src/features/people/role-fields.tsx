import { useQuery } from '@tanstack/react-query';
import { useController, useWatch } from 'react-hook-form';
import { ROLES } from '../../../shared/permissions/roles.ts';
import { siteQueries } from '../../api/sites.ts';
import { useMessages } from '../../lib/messages.ts';
import { CheckField, FieldError } from '../../ui/field.tsx';
import { FormCheck, useFieldError } from '../../ui/request-form.tsx';
import { isReaderOnly, type RoleBoxes, rolesOf } from './role-words.ts';

/** Several may be held; each says what it is for. A reader may be held to some sites. */
export function RoleFields() {
  const t = useMessages();
  const error = useFieldError('rolesError');
  const boxes = useWatch({ name: 'roles' }) as RoleBoxes;
  return (
    <>
      <fieldset>
        <legend className="type-label mb-1 text-ink-soft">{t('people.roles')}</legend>
        {ROLES.map((role) => (
          <FormCheck
            key={role}
            name={`roles.${role}`}
            label={t(`people.role.${role}`)}
            hint={t(`people.roleHint.${role}`)}
          />
        ))}
        {error ? <FieldError>{error}</FieldError> : null}
      </fieldset>
      {isReaderOnly(rolesOf(boxes)) ? <SiteBoxes /> : null}
    </>
  );
}

/** None chosen stands for all of them. */
function SiteBoxes() {
  const t = useMessages();
  const sites = useQuery(siteQueries.choice());
  const { field } = useController({ name: 'siteIds' });
  const chosen = (field.value ?? []) as string[];
  return (
    <fieldset className="border-l-4 border-rule pl-3">
      <legend className="type-label mb-1 text-ink-soft">{t('people.sites')}</legend>
      <p className="text-[0.9375rem] text-ink-soft">
        {chosen.length === 0 ? t('people.allSites') : t('people.sitesCount', { count: chosen.length })}
      </p>
      {sites.data?.map(({ id, name, customerName }) => (
        <CheckField
          key={id}
          label={`${name}, ${customerName}`}
          checked={chosen.includes(id)}
          onChange={(event) =>
            field.onChange(event.target.checked ? [...chosen, id] : chosen.filter((each) => each !== id))
          }
        />
      ))}
    </fieldset>
  );
}
