import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { useNavigate } from 'react-router-dom';
import type { z } from 'zod';
import { acceptInvitationRequest } from '../../../shared/people/people.schema.ts';
import { useAcceptInvitation } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError, TextField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { fieldMessage, showProblem } from './form-problem.ts';
import { SessionPage } from './session-page.tsx';
import { useMailedToken } from './use-mailed-token.ts';

export async function loader() {
  await loadMessages('session');
  return null;
}

const details = acceptInvitationRequest.omit({ token: true });

export function Component() {
  const t = useMessages();
  const token = useMailedToken();
  const navigate = useNavigate();
  const accept = useAcceptInvitation();
  const form = useForm<z.input<typeof details>, unknown, z.output<typeof details>>({
    resolver: zodResolver(details),
    defaultValues: { name: '', password: '' },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit(async (values) => {
    try {
      await accept.mutateAsync({ token, ...values });
      await navigate('/', { replace: true });
    } catch (error) {
      showProblem(error, form.setError, ['name', 'password']);
    }
  });
  return (
    <SessionPage title={t('session.invitation.title')} lead={t('session.invitation.lead')}>
      {token === '' ? (
        <Notice title={t('session.noToken')} />
      ) : (
        <form noValidate onSubmit={submit} className="flex flex-col gap-5">
          <TextField
            big
            label={t('session.name')}
            autoComplete="name"
            error={fieldMessage(errors.name)}
            {...form.register('name')}
          />
          <TextField
            big
            label={t('session.newPassword')}
            type="password"
            autoComplete="new-password"
            hint={t('session.passwordRuleShort')}
            error={fieldMessage(errors.password)}
            {...form.register('password')}
          />
          {errors.root ? <FieldError>{errors.root.message}</FieldError> : null}
          <Button kind="act" wide type="submit" busy={accept.isPending}>
            {t('session.invitation.act')}
          </Button>
        </form>
      )}
    </SessionPage>
  );
}
