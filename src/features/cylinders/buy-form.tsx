import { useState } from 'react';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { usePostGroup } from '../../api/entries.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useSession } from '../../api/session.ts';
import { useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput, toLocalInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { readQuantity } from '../../ui/quantity-draft.ts';
import { fillDangers } from './fill-dangers.ts';
import { DangerGate, FormFoot, massUnitOf } from './form-parts.tsx';
import { emptyPurchase, type PurchaseDraft, purchaseRequest } from './purchase.ts';
import { PURCHASE_PLACES, PurchaseFields } from './purchase-fields.tsx';

/** Refrigerant bought into a cylinder that is in the register already. */
export function BuyForm({
  cylinder,
  onDone,
  onCancel,
}: {
  cylinder: Cylinder;
  onDone: (message: string) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const post = usePostGroup();
  const [draft, setDraft, clear] = useDraft<PurchaseDraft>(`cylinder.${cylinder.id}.buy`, () =>
    emptyPurchase(newId, massUnitOf(preferences.mass), {
      local: toLocalInput(deviceNow()),
      day: toDayInput(deviceNow()),
    }),
  );
  const [errors, setErrors] = useState<FormError[]>([]);
  const mass = readQuantity('mass', draft.mass, { locale: preferences.locale });
  const addedG = mass.is === 'read' ? mass.base : 0;
  const used = cylinder.contentG > 0 || cylinder.lastWeighedAt !== null;
  const jurisdiction = useSession()?.firm.jurisdiction ?? null;
  const fill = { addedG, refrigerant: cylinder.refrigerant, day: draft.at.slice(0, 10), jurisdiction };
  const dangers = addedG > 0 ? fillDangers({ ...cylinder, used }, fill) : [];
  const set = (change: Partial<PurchaseDraft>) => setDraft((now) => ({ ...now, ...change }));
  const send = () => {
    const body = purchaseRequest(draft, cylinder, mass, deviceNow().toISOString());
    const found = schemaErrors(entryGroupRequest, body);
    if (dangers.length > 0 && draft.reason.trim() === '') {
      found.push({ pointer: '/reason', code: 'reasonRequired', message: t('cylinders.form.reasonNeeded') });
    }
    setErrors(found);
    if (found.length > 0) return;
    post.mutate(body, {
      onSuccess: () => {
        clear();
        onDone(t('cylinders.buy.done', { mass: format.mass(addedG) }));
      },
      onError: (error) => setErrors(answerErrors(error)),
    });
  };
  return (
    <form
      noValidate
      className="flex flex-col"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <PurchaseFields draft={draft} errors={errors} onChange={set} />
      <DangerGate
        name="buy-danger"
        dangers={dangers}
        happened={draft.happened}
        onHappened={(happened) => set({ happened })}
        reason={draft.reason}
        reasonError={errorAt(errors, '/reason')}
        onReason={(reason) => set({ reason })}
      />
      <FormFoot
        errors={errors}
        shown={PURCHASE_PLACES}
        busy={post.isPending}
        stopped={dangers.length > 0 && !draft.happened}
        act={addedG > 0 ? t('cylinders.buy.actMass', { mass: format.mass(addedG) }) : t('cylinders.buy.act')}
        onCancel={onCancel}
      />
    </form>
  );
}
