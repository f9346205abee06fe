import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import { z } from 'zod';
import { newPassword } from '../../../shared/session/session.schema.ts';
import { useCompletePasswordReset } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button, ButtonLink } from '../../ui/button.tsx';
import { FieldError, TextField } from '../../ui/field.tsx';
import { Done, Notice } from '../../ui/notice.tsx';
import { fieldMessage, showProblem } from './form-problem.ts';
import { SessionPage } from './session-page.tsx';
import { useMailedToken } from './use-mailed-token.ts';

export async function loader() {
  await loadMessages('session');
  return null;
}

const passwordForm = z.strictObject({ newPassword });

export function Component() {
  const t = useMessages();
  const token = useMailedToken();
  const reset = useCompletePasswordReset();
  const form = useForm<z.input<typeof passwordForm>, unknown, z.output<typeof passwordForm>>({
    resolver: zodResolver(passwordForm),
    defaultValues: { newPassword: '' },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit(async (values) => {
    try {
      await reset.mutateAsync({ token, ...values });
    } catch (error) {
      showProblem(error, form.setError, ['newPassword']);
    }
  });
  return (
    <SessionPage title={t('session.reset.title')} lead={t('session.passwordRule')}>
      {token === '' ? (
        <Notice title={t('session.noToken')} />
      ) : reset.isSuccess ? (
        <>
          <Done>{t('session.reset.done')}</Done>
          <ButtonLink kind="act" wide to="/sign-in">
            {t('session.signIn.act')}
          </ButtonLink>
        </>
      ) : (
        <form noValidate onSubmit={submit} className="flex flex-col gap-5">
          <TextField
            big
            label={t('session.newPassword')}
            type="password"
            autoComplete="new-password"
            error={fieldMessage(errors.newPassword)}
            {...form.register('newPassword')}
          />
          {errors.root ? <FieldError>{errors.root.message}</FieldError> : null}
          <Button kind="act" wide type="submit" busy={reset.isPending}>
            {t('session.reset.act')}
          </Button>
        </form>
      )}
      <Link className="inline-flex min-h-12 items-center" to="/forgotten-password">
        {t('session.reset.newLink')}
      </Link>
    </SessionPage>
  );
}
