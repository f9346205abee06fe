import type { z } from 'zod';
import { type createdToken, createTokenRequest } from '../../../shared/people/people.schema.ts';
import { TOKEN_SCOPES, type TokenScope } from '../../../shared/permissions/roles.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { useCreateToken } from '../../api/people.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError } from '../../ui/field.tsx';
import { FormCheck, FormText, RequestForm, useFieldError, useRequestForm } from '../../ui/request-form.tsx';

const SCOPES = Object.keys(TOKEN_SCOPES) as TokenScope[];
/** A quarter: long enough for a program, short enough to be renewed with thought. */
const USUAL_DAYS = 90;

interface Values {
  id: string;
  name: string;
  scopes: Record<TokenScope, boolean>;
  scopesError: string;
  expiresOn: string;
}

export function TokenForm({ onMade }: { onMade: (token: z.output<typeof createdToken>) => void }) {
  const t = useMessages();
  const create = useCreateToken();
  const { form, submit, forget } = useRequestForm<Values>({
    draftKey: 'token',
    initial: () => ({
      id: newId(),
      name: '',
      scopes: { read: true, post: false, registers: false },
      scopesError: '',
      expiresOn: toDayInput(new Date(deviceNow().getTime() + USUAL_DAYS * 24 * 3600 * 1000)),
    }),
    toRequest: ({ id, name, scopes, expiresOn }) => ({
      request: { id, name, scopes: SCOPES.filter((scope) => scopes[scope]), expiresOn },
      unreadable: [],
    }),
    check: (request) => schemaErrors(createTokenRequest, request),
    places: () => [
      ['/name', 'name'],
      ['/scopes', 'scopesError'],
      ['/expiresOn', 'expiresOn'],
    ],
  });
  const send = submit(async (request) => {
    const token = await create.mutateAsync(request);
    forget();
    onMade(token);
  }, answerErrors);
  return (
    <RequestForm id="token" form={form} onSubmit={(event) => void send(event)}>
      <FormText name="name" layout="stack" label={t('people.tokenName')} maxLength={80} autoComplete="off" />
      <Scopes />
      <FormText name="expiresOn" layout="stack" type="date" label={t('people.tokenExpires')} />
      <Button kind="act" wide className="mt-3" type="submit" busy={form.formState.isSubmitting}>
        {t('people.tokenAct')}
      </Button>
    </RequestForm>
  );
}

function Scopes() {
  const t = useMessages();
  const error = useFieldError('scopesError');
  return (
    <fieldset className="pt-3">
      <legend className="type-label mb-1 text-ink-soft">{t('people.scopes')}</legend>
      {SCOPES.map((scope) => (
        <FormCheck
          key={scope}
          name={`scopes.${scope}`}
          label={t(`people.scope.${scope}`)}
          hint={t(`people.scopeHint.${scope}`)}
        />
      ))}
      {error ? <FieldError>{error}</FieldError> : null}
    </fieldset>
  );
}
