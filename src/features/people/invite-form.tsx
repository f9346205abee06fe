import { inviteRequest, type SentInvitation } from '../../../shared/people/people.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { useInvite } from '../../api/people.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { Button } from '../../ui/button.tsx';
import { FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { RoleFields } from './role-fields.tsx';
import { boxesOf, isReaderOnly, type RoleBoxes, rolesOf } from './role-words.ts';

interface Values {
  id: string;
  email: string;
  name: string;
  roles: RoleBoxes;
  rolesError: string;
  siteIds: string[];
}

/** A mailed link that works once, for seven days. */
export function InviteForm({ onDone }: { onDone: (sent: SentInvitation) => void }) {
  const t = useMessages();
  const invite = useInvite();
  const { form, submit, forget } = useRequestForm<Values>({
    draftKey: 'invite',
    initial: () => ({ id: newId(), email: '', name: '', roles: boxesOf(['technician']), rolesError: '', siteIds: [] }),
    toRequest: ({ id, email, name, roles, siteIds }) => {
      const held = rolesOf(roles);
      const sites = isReaderOnly(held) && siteIds.length > 0 ? siteIds : null;
      return { request: { id, email, name, roles: held, siteIds: sites }, unreadable: [] };
    },
    check: (request) => schemaErrors(inviteRequest, request),
    places: () => [
      ['/email', 'email'],
      ['/name', 'name'],
      ['/roles', 'rolesError'],
      ['/siteIds', 'siteIds'],
    ],
  });
  const send = submit(async (request) => {
    const sent = await invite.mutateAsync(request);
    forget();
    onDone(sent);
  }, answerErrors);
  return (
    <RequestForm id="invite" form={form} onSubmit={(event) => void send(event)}>
      <FormText name="name" layout="stack" label={t('people.name')} autoComplete="off" maxLength={120} />
      <FormText
        name="email"
        layout="stack"
        type="email"
        inputMode="email"
        label={t('people.email')}
        autoComplete="off"
        maxLength={254}
      />
      <div className="pt-3">
        <RoleFields />
      </div>
      <p className="pt-2 text-[0.9375rem] text-ink-soft">{t('people.inviteHint')}</p>
      <Button kind="act" wide className="mt-3" type="submit" busy={form.formState.isSubmitting}>
        {t('people.inviteAct')}
      </Button>
    </RequestForm>
  );
}
