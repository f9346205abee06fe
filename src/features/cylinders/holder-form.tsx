import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { useUpdateCylinder } from '../../api/cylinders.ts';
import { answerErrors, type FormError } from '../../api/form-errors.ts';
import { peopleQueries } from '../../api/people.ts';
import { useSession } from '../../api/session.ts';
import { useMessages } from '../../lib/messages.ts';
import { SelectField } from '../../ui/field.tsx';
import { FormFoot } from './form-parts.tsx';

/** Who has it now: a person with their van, or nobody (the shop). */
export function HolderForm({
  cylinder,
  onDone,
  onCancel,
}: {
  cylinder: Cylinder;
  onDone: (message: string) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const session = useSession();
  const people = useQuery(peopleQueries.everybody());
  const update = useUpdateCylinder(cylinder);
  const [holder, setHolder] = useState(cylinder.heldBy ?? session?.person.id ?? '');
  const [errors, setErrors] = useState<FormError[]>([]);
  const choices =
    people.data
      ?.filter(({ active, id }) => active || id === cylinder.heldBy)
      .map(({ id, name, van }) => ({ value: id, label: van ? `${name}, ${van}` : name })) ?? [];
  const name = people.data?.find(({ id }) => id === holder)?.name;
  return (
    <form
      noValidate
      className="flex flex-col"
      onSubmit={(event) => {
        event.preventDefault();
        update.mutate(
          { heldBy: holder || null },
          {
            onSuccess: () =>
              onDone(name && holder ? t('cylinders.assign.done', { name }) : t('cylinders.assign.doneNobody')),
            onError: (error) => setErrors(answerErrors(error)),
          },
        );
      }}
    >
      <SelectField
        layout="row"
        label={t('cylinders.holder')}
        placeholder={t('cylinders.nobody')}
        choices={choices}
        value={holder}
        onChange={(event) => setHolder(event.target.value)}
      />
      <FormFoot
        errors={errors}
        shown={[]}
        busy={update.isPending}
        act={name && holder ? t('cylinders.assign.actName', { name }) : t('cylinders.assign.actNobody')}
        onCancel={onCancel}
      />
    </form>
  );
}
