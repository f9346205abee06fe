import { useRef, useState } from 'react';
import type { EntryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { usePostGroup } from '../../api/entries.ts';
import { NetworkError, Problem } from '../../api/http.ts';
import { useAddFullCharge } from '../../api/units.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import type { FullChargeToSet } from './weigh-in-data.ts';

/** What stands in the way of posting, in words, and whether a reason would let it through. */
export interface PostingFault {
  messages: string[];
  needsReason: boolean;
}

/**
 * Sends what a weigh-in posts, one after the other. Every part has its id already: after a lost answer the same press
 * sends the same again, and what stands already is only confirmed.
 */
export function usePosting(unitId: string) {
  const t = useMessages();
  const post = usePostGroup();
  const setFullCharge = useAddFullCharge(unitId);
  const sending = useRef(false);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<PostingFault | null>(null);

  async function send(
    groups: readonly EntryGroupRequest[],
    fullCharge: FullChargeToSet | null,
  ): Promise<EntryGroupResponse[] | null> {
    if (sending.current) return null;
    sending.current = true;
    setBusy(true);
    setFault(null);
    try {
      if (fullCharge) {
        const { massG, ...rest } = fullCharge;
        await setFullCharge.mutateAsync({ ...rest, mass: { value: String(massG), unit: 'g' }, method: 'manufacturer' });
      }
      const answers: EntryGroupResponse[] = [];
      for (const group of groups)
        answers.push(await post.mutateAsync({ ...group, deviceSentAt: deviceNow().toISOString() }));
      return answers;
    } catch (error) {
      setFault(faultOf(error));
      return null;
    } finally {
      sending.current = false;
      setBusy(false);
    }
  }

  function faultOf(error: unknown): PostingFault {
    if (error instanceof NetworkError) return { messages: [t('weighIn.post.offline')], needsReason: false };
    if (!(error instanceof Problem)) return { messages: [String(error)], needsReason: false };
    if (error.code === 'idReused') return { messages: [t('weighIn.post.idReused')], needsReason: false };
    const reasons = [...new Set(error.errors.map(({ message }) => message))];
    return {
      messages: reasons.length > 0 ? reasons : [error.message],
      needsReason: error.code === 'reasonRequired',
    };
  }

  return { send, busy, fault };
}
