import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { Dialog } from '../../ui/dialog.tsx';
import { BuyForm } from './buy-form.tsx';
import { ChangeForm } from './change-form.tsx';
import { HolderForm } from './holder-form.tsx';
import { TareForm } from './tare-form.tsx';
import { WeighForm } from './weigh-form.tsx';

export type CylinderAction = 'weigh' | 'buy' | 'assign' | 'tare' | 'change';

/** What is done with a cylinder, each as a short form over its page. What was typed stays when it is closed. */
export function ActionDialog({
  cylinder,
  action,
  onClose,
  onDone,
  onRevised,
}: {
  cylinder: Cylinder;
  action: CylinderAction | null;
  onClose: () => void;
  onDone: (message: string) => void;
  onRevised: (entries: EntryGroupResponse['entries'], tareG: number) => void;
}) {
  const t = useMessages();
  const form = { cylinder, onDone, onCancel: onClose };
  return (
    <Dialog
      open={action !== null}
      onClose={onClose}
      title={action ? t(`cylinders.action.${action}Of`, { tag: cylinder.tag }) : ''}
    >
      {action === 'weigh' ? <WeighForm {...form} /> : null}
      {action === 'buy' ? <BuyForm {...form} /> : null}
      {action === 'assign' ? <HolderForm {...form} /> : null}
      {action === 'tare' ? <TareForm cylinder={cylinder} onRevised={onRevised} onCancel={onClose} /> : null}
      {action === 'change' ? <ChangeForm {...form} /> : null}
    </Dialog>
  );
}
