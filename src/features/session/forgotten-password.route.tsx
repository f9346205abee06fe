import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import type { z } from 'zod';
import { requestPasswordReset } from '../../../shared/session/session.schema.ts';
import { useAskForPasswordReset } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError, TextField } from '../../ui/field.tsx';
import { Done } from '../../ui/notice.tsx';
import { fieldMessage, showProblem } from './form-problem.ts';
import { SessionPage } from './session-page.tsx';

export async function loader() {
  await loadMessages('session');
  return null;
}

export function Component() {
  const t = useMessages();
  const ask = useAskForPasswordReset();
  const form = useForm<z.input<typeof requestPasswordReset>, unknown, z.output<typeof requestPasswordReset>>({
    resolver: zodResolver(requestPasswordReset),
    defaultValues: { email: '' },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit(async ({ email }) => {
    try {
      await ask.mutateAsync(email);
    } catch (error) {
      showProblem(error, form.setError, ['email']);
    }
  });
  return (
    <SessionPage title={t('session.forgotten.title')} lead={t('session.forgotten.lead')}>
      {ask.isSuccess ? (
        // The same words whether or not the address is known here.
        <Done>{t('session.forgotten.sent')}</Done>
      ) : (
        <form noValidate onSubmit={submit} className="flex flex-col gap-5">
          <TextField
            big
            label={t('session.email')}
            type="email"
            autoComplete="username"
            inputMode="email"
            error={fieldMessage(errors.email)}
            {...form.register('email')}
          />
          {errors.root ? <FieldError>{errors.root.message}</FieldError> : null}
          <Button kind="act" wide type="submit" busy={ask.isPending}>
            {t('session.forgotten.act')}
          </Button>
        </form>
      )}
      <Link className="inline-flex min-h-12 items-center" to="/sign-in">
        {t('session.backToSignIn')}
      </Link>
    </SessionPage>
  );
}
