import { zodResolver } from '@hookform/resolvers/zod';
import { useQuery } from '@tanstack/react-query';
import { useEffect } from 'react';
import { useForm } from 'react-hook-form';
import { useNavigate } from 'react-router-dom';
import type { z } from 'zod';
import { acceptInvitationRequest } from '../../../shared/people/people.schema.ts';
import { invitationQuery, useAcceptInvitation } from '../../api/session.ts';
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
  const preview = useQuery(invitationQuery(token));
  const form = useForm<z.input<typeof details>, unknown, z.output<typeof details>>({
    resolver: zodResolver(details),
    defaultValues: { name: '', password: '' },
  });
  const invited = preview.data?.name;
  // The name that the firm wrote stands there already; for an account the server keeps its own.
  useEffect(() => {
    if (invited) form.setValue('name', invited);
  }, [invited, form]);
  const { errors } = form.formState;
  const submit = form.handleSubmit(async (values) => {
    try {
      await accept.mutateAsync({ token, ...values });
      await navigate('/', { replace: true });
    } catch (error) {
      showProblem(error, form.setError, ['name', 'password']);
    }
  });
  if (token === '' || preview.isError) {
    return (
      <SessionPage title={t('session.invitation.title')}>
        <Notice title={t(token === '' ? 'session.noToken' : 'session.invitation.gone')}>
          {preview.error?.message}
        </Notice>
      </SessionPage>
    );
  }
  const firm = preview.data?.firmName ?? '';
  const hasAccount = preview.data?.hasAccount ?? false;
  return (
    <SessionPage
      title={t('session.invitation.title')}
      lead={preview.data ? t('session.invitation.toFirm', { firm, email: preview.data.email }) : undefined}
    >
      <p>{t(hasAccount ? 'session.invitation.hasAccount' : 'session.invitation.lead')}</p>
      <form noValidate onSubmit={submit} className="flex flex-col gap-5">
        {hasAccount ? null : (
          <TextField
            big
            label={t('session.name')}
            autoComplete="name"
            error={fieldMessage(errors.name)}
            {...form.register('name')}
          />
        )}
        <TextField
          big
          label={t(hasAccount ? 'session.password' : 'session.newPassword')}
          type="password"
          autoComplete={hasAccount ? 'current-password' : 'new-password'}
          hint={hasAccount ? undefined : t('session.passwordRuleShort')}
          error={fieldMessage(errors.password)}
          {...form.register('password')}
        />
        {errors.root ? <FieldError>{errors.root.message}</FieldError> : null}
        <Button kind="act" wide type="submit" busy={accept.isPending || preview.isPending}>
          {hasAccount ? t('session.invitation.join', { firm }) : t('session.invitation.act')}
        </Button>
      </form>
    </SessionPage>
  );
}
