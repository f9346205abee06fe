import { type Person, updatePersonRequest } from '../../../shared/people/people.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { useUpdatePerson } from '../../api/people.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError } from '../../ui/field.tsx';
import { FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { RoleFields } from './role-fields.tsx';
import { boxesOf, isReaderOnly, type RoleBoxes, rolesOf } from './role-words.ts';

interface Values {
  roles: RoleBoxes;
  /** Where the complaint about the roles is said; holds nothing. */
  rolesError: string;
  siteIds: string[];
  van: string;
}

/** What somebody may do and which van they drive; and the way out of the firm and back in. */
export function PersonForm({
  person,
  isMe,
  onDone,
}: {
  person: Person;
  isMe: boolean;
  onDone: (message: string) => void;
}) {
  const t = useMessages();
  const update = useUpdatePerson();
  const turn = useUpdatePerson();
  const { form, submit, forget } = useRequestForm<Values>({
    draftKey: `person.${person.id}`,
    initial: () => ({
      roles: boxesOf(person.roles),
      rolesError: '',
      siteIds: person.siteIds ?? [],
      van: person.van ?? '',
    }),
    toRequest: ({ roles, siteIds, van }) => {
      const held = rolesOf(roles);
      return {
        request: {
          roles: held,
          siteIds: isReaderOnly(held) && siteIds.length > 0 ? siteIds : null,
          van: van.trim() || null,
        },
        unreadable: [],
      };
    },
    check: (request) => schemaErrors(updatePersonRequest, request),
    places: () => [
      ['/roles', 'rolesError'],
      ['/siteIds', 'siteIds'],
      ['/van', 'van'],
    ],
  });
  const send = submit(async (change) => {
    await update.mutateAsync({ id: person.id, version: person.version, change });
    forget();
    onDone(t('people.changed', { name: person.name }));
  }, answerErrors);
  const setActive = (active: boolean) =>
    turn.mutate(
      { id: person.id, version: person.version, change: { active } },
      { onSuccess: () => onDone(t(active ? 'people.activated' : 'people.deactivated', { name: person.name })) },
    );
  return (
    <div className="flex flex-col gap-5">
      <p className="text-ink-soft">{person.email}</p>
      <RequestForm id={`person-${person.id}`} form={form} onSubmit={(event) => void send(event)}>
        <RoleFields />
        <FormText name="van" label={t('people.van')} maxLength={60} autoComplete="off" />
      </RequestForm>
      <Button kind="act" wide type="submit" form={`person-${person.id}`} busy={form.formState.isSubmitting}>
        {t('people.save', { name: person.name })}
      </Button>
      <div className="flex flex-col gap-2 border-t border-rule pt-4">
        {turn.isError
          ? answerErrors(turn.error).map(({ message }) => <FieldError key={message}>{message}</FieldError>)
          : null}
        {person.active ? (
          <>
            <p className="text-[0.9375rem] text-ink-soft">{t('people.deactivateHint')}</p>
            <Button kind="grave" busy={turn.isPending} onClick={() => setActive(false)}>
              {t(isMe ? 'people.deactivateMe' : 'people.deactivate', { name: person.name })}
            </Button>
          </>
        ) : (
          <Button busy={turn.isPending} onClick={() => setActive(true)}>
            {t('people.activate', { name: person.name })}
          </Button>
        )}
      </div>
    </div>
  );
}
