import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Link, type LoaderFunctionArgs, redirect, useNavigate, useSearchParams } from 'react-router-dom';
import type { z } from 'zod';
import { signInRequest } from '../../../shared/session/session.schema.ts';
import { queryClient } from '../../api/query-client.ts';
import { placeAfterSignIn, sessionQueries, useSignIn } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError, TextField } from '../../ui/field.tsx';
import { fieldMessage, showProblem } from './form-problem.ts';
import { SessionPage } from './session-page.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await loadMessages('session');
  const session = await queryClient.ensureQueryData(sessionQueries.current()).catch(() => null);
  if (session) throw redirect(placeAfterSignIn(new URL(request.url).searchParams.get('to')));
  return null;
}

export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const signIn = useSignIn();
  const form = useForm<z.input<typeof signInRequest>, unknown, z.output<typeof signInRequest>>({
    resolver: zodResolver(signInRequest),
    defaultValues: { email: '', password: '' },
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit(async (values) => {
    try {
      const session = await signIn.mutateAsync(values);
      const place = placeAfterSignIn(search.get('to'));
      const chooses = session.firms.length > 1 && place === '/';
      await navigate(chooses ? '/choose-firm' : place, { replace: true });
    } catch (error) {
      showProblem(error, form.setError, ['email', 'password']);
    }
  });
  return (
    <SessionPage title={t('session.signIn.title')} lead={t('session.signIn.lead')}>
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
        <TextField
          big
          label={t('session.password')}
          type="password"
          autoComplete="current-password"
          error={fieldMessage(errors.password)}
          {...form.register('password')}
        />
        {errors.root ? <FieldError>{errors.root.message}</FieldError> : null}
        <Button kind="act" wide type="submit" busy={signIn.isPending}>
          {t('session.signIn.act')}
        </Button>
      </form>
      <p className="flex flex-wrap justify-between gap-x-6 gap-y-1">
        <Link className="inline-flex min-h-12 items-center" to="/forgotten-password">
          {t('session.signIn.forgotten')}
        </Link>
        <Link className="inline-flex min-h-12 items-center" to="/charge">
          {t('session.signIn.calculator')}
        </Link>
      </p>
    </SessionPage>
  );
}
