import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { changePasswordRequest } from '../../../shared/session/session.schema.ts';
import { useChangePassword } from '../../api/session.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Disclosure } from '../../ui/disclosure.tsx';
import { FieldError, TextField } from '../../ui/field.tsx';
import { Done } from '../../ui/notice.tsx';
import { fieldMessage, showProblem } from './form-problem.ts';

const EMPTY = { currentPassword: '', newPassword: '' };

export function ChangePassword() {
  const t = useMessages();
  const change = useChangePassword();
  const form = useForm<z.input<typeof changePasswordRequest>, unknown, z.output<typeof changePasswordRequest>>({
    resolver: zodResolver(changePasswordRequest),
    defaultValues: EMPTY,
  });
  const { errors } = form.formState;
  const submit = form.handleSubmit(async (values) => {
    try {
      await change.mutateAsync(values);
      form.reset(EMPTY);
    } catch (error) {
      showProblem(error, form.setError, ['currentPassword', 'newPassword']);
    }
  });
  return (
    <div className="border-t border-rule">
      <Disclosure title={t('session.password.title')}>
        <form noValidate onSubmit={submit} className="flex flex-col gap-5 pt-2">
          <TextField
            label={t('session.password.current')}
            type="password"
            autoComplete="current-password"
            error={fieldMessage(errors.currentPassword)}
            {...form.register('currentPassword')}
          />
          <TextField
            label={t('session.newPassword')}
            hint={t('session.passwordRuleShort')}
            type="password"
            autoComplete="new-password"
            error={fieldMessage(errors.newPassword)}
            {...form.register('newPassword')}
          />
          {errors.root ? <FieldError>{errors.root.message}</FieldError> : null}
          {change.isSuccess ? <Done>{t('session.password.done')}</Done> : null}
          <Button type="submit" busy={change.isPending}>
            {t('session.password.act')}
          </Button>
        </form>
      </Disclosure>
    </div>
  );
}
