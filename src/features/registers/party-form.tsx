import type { z } from 'zod';
import {
  createPartyRequest,
  PARTY_KINDS,
  type Party,
  type partyKind,
  updatePartyRequest,
} from '../../../shared/parties/parties.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { useCreateParty, useUpdateParty } from '../../api/parties.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { Button } from '../../ui/button.tsx';
import { FormSelect, FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';

interface Values {
  id: string;
  kind: z.output<typeof partyKind>;
  name: string;
  note: string;
}

export function PartyForm({ party, onDone }: { party: Party | null; onDone: (message: string) => void }) {
  const t = useMessages();
  const create = useCreateParty();
  const update = useUpdateParty({ id: party?.id ?? '', version: party?.version ?? 0 });
  const { form, submit, forget } = useRequestForm<Values>({
    draftKey: `party.${party?.id ?? 'new'}`,
    initial: () => ({
      id: party?.id ?? newId(),
      kind: party?.kind ?? 'supplier',
      name: party?.name ?? '',
      note: party?.note ?? '',
    }),
    toRequest: ({ id, kind, name, note }) => {
      const facts = { name, note: note.trim() || null };
      return { request: party ? facts : { id, kind, ...facts }, unreadable: [] };
    },
    check: (request) => schemaErrors(party ? updatePartyRequest : createPartyRequest, request),
    places: () => [
      ['/name', 'name'],
      ['/note', 'note'],
      ['/kind', 'kind'],
    ],
  });
  const send = submit(async (request) => {
    const saved = party ? await update.mutateAsync(request) : await create.mutateAsync(request);
    forget();
    onDone(t(party ? 'registers.changed' : 'registers.added', { name: saved.name }));
  }, answerErrors);
  return (
    <RequestForm id="party" form={form} onSubmit={(event) => void send(event)}>
      {party ? null : (
        <FormSelect
          name="kind"
          label={t('registers.kind')}
          choices={PARTY_KINDS.map((kind) => ({ value: kind, label: t(`registers.partyKind.${kind}`) }))}
        />
      )}
      <FormText name="name" label={t('registers.name')} maxLength={160} autoComplete="off" />
      <FormText name="note" layout="stack" label={t('registers.note')} maxLength={500} autoComplete="off" />
      <Button kind="act" wide className="mt-3" type="submit" busy={form.formState.isSubmitting}>
        {t(party ? 'registers.save' : 'registers.parties.act')}
      </Button>
    </RequestForm>
  );
}
