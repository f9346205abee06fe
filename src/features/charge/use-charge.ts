import { useMemo } from 'react';
import { calculateCharge } from '../../../shared/charge/calculate-charge.ts';
import type { ChargeRequest, ChargeResponse } from '../../../shared/charge/charge.schema.ts';
import type { ChargeStep } from '../../../shared/charge/charge-result.ts';
import { presentCharge } from '../../../shared/charge/present-charge.ts';
import { findRefrigerantFacts } from '../../../shared/charge/refrigerant-facts.ts';
import type { Refusal } from '../../../shared/problems/outcome.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import type { ChargeDraft } from './charge-draft.ts';
import { type Pointer, readDraft } from './draft-to-request.ts';
import { inOwnUnits } from './in-own-units.ts';
import { useFormulaCompiler, useReference } from './reference-tables.ts';

export type ChargeAnswer =
  | { is: 'incomplete'; missing: Pointer[]; unreadable: Pointer[] }
  /** The formula's parser is on its way, or could not be fetched. */
  | { is: 'waiting'; failed: boolean }
  | { is: 'refused'; refusals: readonly Refusal[] }
  | { is: 'done'; request: ChargeRequest; result: ChargeResponse; noRoomCheckUpToG: number | null };

export interface Charge {
  answer: ChargeAnswer;
  /** The message for the field at this place, if a rule or limit refuses what it holds. */
  errorAt: (pointer: Pointer) => string | undefined;
}

/** The charge of what stands on the screen, worked out at every keystroke by the code that the server runs too. */
export function useCharge(draft: ChargeDraft): Charge {
  const t = useMessages();
  const preferences = usePreferences();
  const { locale } = preferences;
  const { reference, settled } = useReference(draft.refrigerant);
  const { compileFormula, failed } = useFormulaCompiler(draft.rateKind === 'formula');
  return useMemo(() => {
    const { request, missing, unreadable } = readDraft(draft, locale);
    if (!request) return { answer: { is: 'incomplete', missing, unreadable }, errorAt: () => undefined };
    if (request.basis.rate.kind === 'formula' && !compileFormula) {
      return { answer: { is: 'waiting', failed }, errorAt: () => undefined };
    }
    const outcome = calculateCharge(request, { reference, compileFormula });
    if (!outcome.ok) {
      const errors = new Map<Pointer, string>();
      for (const refusal of outcome.refusals) {
        const at = fieldOf(refusal.path, draft);
        const message = inOwnUnits(sayRefusal(refusal, t), preferences);
        errors.set(at, errors.has(at) ? `${errors.get(at)} ${message}` : message);
      }
      return { answer: { is: 'refused', refusals: outcome.refusals }, errorAt: (pointer) => errors.get(pointer) };
    }
    const said = { ...outcome.value, steps: outcome.value.steps.filter(saysSomething) };
    const result = presentCharge(said, (key, params) => t(key, { ...params }));
    // Until the table has come, "not checked against the pipe" would only flash by.
    if (!settled) result.warnings = result.warnings.filter((warning) => warning.code !== 'plausibilityNotKnown');
    const noRoomCheckUpToG = findRefrigerantFacts(reference, draft.refrigerant)?.noRoomCheckUpToG ?? null;
    return { answer: { is: 'done', request, result, noRoomCheckUpToG }, errorAt: () => undefined };
  }, [draft, preferences, locale, reference, settled, compileFormula, failed, t]);
}

/** A rounding that changes nothing is a line that nobody needs to check. The charge sheet keeps every step. */
const saysSomething = (step: ChargeStep, index: number, all: readonly ChargeStep[]): boolean =>
  step.code !== 'rounded' || step.value !== all[index - 1]?.value;

export const sayRefusal = ({ code, params, given, allowed }: Refusal, t: Translate): string =>
  t(`problem.${code}`, {
    ...(given === null || given === undefined ? {} : { given: String(given) }),
    ...(allowed === null || allowed === undefined ? {} : { allowed: String(allowed) }),
    ...params,
  });

/** A refusal about the whole line set stands beside the run where there is only one. */
function fieldOf(path: Pointer, draft: ChargeDraft): Pointer {
  if (path === '/lineSet/branches' && draft.pipes.length === 1) return '/lineSet/branches/0/lengthM';
  if (path === '/previousLineSet/branches' && draft.previousPipes.length === 1) {
    return '/previousLineSet/branches/0/lengthM';
  }
  if (path === '/basis/precharge/allocation') return '/basis/precharge/allocation';
  return path;
}
