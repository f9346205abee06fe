import { useQuery } from '@tanstack/react-query';
import { useCallback, useEffect, useMemo, useState } from 'react';
import { usePostGroup, useReverseGroup } from '../../api/entries.ts';
import { previewQueries, type ToPreview } from '../../api/entry-previews.ts';
import { answerErrors, type FormError } from '../../api/form-errors.ts';
import { Problem } from '../../api/http.ts';
import { useChangeUnit, useRefreshUnits } from '../../api/units.ts';
import { useDraft } from '../../lib/draft.ts';
import { deviceNow, toDayInput, toLocalInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { type Answers, emptyAnswers, type MassUnit } from './answers.ts';
import { type Complaint, complaintsOf } from './complaints.ts';
import type { RecordForm } from './form.ts';
import type { BuiltGroup } from './group-draft.ts';
import { blankOfChange } from './unit-change.ts';
import { isReady, useFormContext } from './use-form-context.ts';

/** Long enough that a figure is typed to its end before it is judged. */
const SETTLES_MS = 350;

/** A sentence of the server, and the blank that it is about. */
interface Refused {
  field: string | undefined;
  message: string;
}

/** The state of one form: what was typed, what is wrong with it, what it would post, and posting it. */
export function useRecord(form: RecordForm, begin: { unitId: string; cylinderId: string }) {
  const t = useMessages();
  const preferences = usePreferences();
  const unit = (preferences.mass === 'lbOz' ? 'lb' : preferences.mass) as MassUnit;
  const initial = useCallback((): Answers => {
    const now = deviceNow();
    const at = { local: toLocalInput(now), day: toDayInput(now) };
    return emptyAnswers({ newId, unit, now: at, ...begin }, form.rows);
  }, [unit, begin, form]);
  const [answers, setAnswers, clear] = useDraft<Answers>(
    `record.${form.kind}.${begin.unitId || begin.cylinderId}`,
    initial,
  );
  const context = useFormContext(answers);
  const questions = form.questions(answers, context);
  const complaints = questions.map((question) => complaintsOf(question, answers, context));
  const isWhole = isReady(answers, context) && complaints.every((found) => found.length === 0);
  const nothing = form.nothingToPost?.(answers, context) ?? null;
  const built = useMemo(() => form.build(answers, context), [form, answers, context]);
  const changes = useMemo(() => form.changes?.(answers, context) ?? [], [form, answers, context]);
  const { onlyRegister = false } = form;
  const toAsk = isWhole && !nothing && !onlyRegister;
  const asked = useSettled(useMemo(() => (toAsk ? toPreview(built) : null), [toAsk, built]));
  const preview = useQuery(previewQueries.of(asked));
  const [refused, setRefused] = useState<Refused[]>([]);
  const [standing, setStanding] = useState<string | null>(null);
  const change = useCallback(
    (part: Partial<Answers>) => {
      setRefused([]);
      setAnswers((now) => ({ ...now, ...part }));
    },
    [setAnswers],
  );
  const answerAsked = questions.some(({ is }) => is === 'fullness') || (preview.data?.questions.length ?? 0) > 0;
  const staleAnswer = preview.isSuccess && !answerAsked && answers.answer !== null;
  useEffect(() => {
    // The masses changed and the unit is no longer in question: an answer that nobody sees is not posted.
    if (staleAnswer) setAnswers((now) => ({ ...now, answer: null }));
  }, [staleAnswer, setAnswers]);
  const post = usePostGroup();
  const reverse = useReverseGroup(built.reverses?.groupId ?? '');
  const changeUnit = useChangeUnit(answers.unitId);
  const refreshUnits = useRefreshUnits();
  const fieldOf = (pointer: string) =>
    built.places.find(([place]) => pointer === place || pointer.startsWith(`${place}/`))?.[1];
  const inBlanks = (errors: readonly FormError[]): Refused[] =>
    errors.map(({ pointer, message }) => ({ field: fieldOf(pointer), message }));
  const groupId = built.reverses?.reversalId ?? built.body.groupId;
  /** One after the other: what went through is not recorded again by the next try, and the group comes last. */
  const send = async (onDone: () => void): Promise<void> => {
    for (const change of changes) {
      try {
        await changeUnit.mutateAsync(change);
      } catch (error) {
        const errors = answerErrors(error);
        setRefused(errors.map(({ pointer, message }) => ({ field: blankOfChange(change.is, pointer), message })));
        return;
      }
    }
    const deviceSentAt = deviceNow().toISOString();
    try {
      if (built.reverses) await reverse.mutateAsync({ ...reversalOf(built), deviceSentAt });
      else if (!onlyRegister) await post.mutateAsync({ ...built.body, deviceSentAt });
    } catch (error) {
      if (isReused(error)) setStanding(groupId);
      else setRefused(inBlanks(answerErrors(error)));
      return;
    }
    if (changes.length > 0) await refreshUnits();
    clear();
    onDone();
  };
  const isOther = preview.isError && isReused(preview.error);
  const serverErrors =
    refused.length > 0 ? refused : preview.isError && !isOther ? inBlanks(answerErrors(preview.error)) : [];
  const isPreviewed = asked !== null && sameBody(asked, built);
  return {
    answers,
    change,
    context,
    questions,
    complaints,
    isWhole,
    nothing,
    built,
    /** Of what is on the screen now; a moment after a keystroke there is none. */
    preview: isPreviewed ? preview : null,
    changes,
    isWaiting: toAsk && (preview.isFetching || !isPreviewed),
    /** Everything that will be recorded is on the screen. */
    isShown: onlyRegister ? isWhole : isPreviewed && preview.data !== undefined,
    send,
    isSending: changeUnit.isPending || post.isPending || reverse.isPending,
    /** The group that an earlier try recorded, whose answer got lost, and that says something else than is typed now. */
    standing: isOther ? groupId : standing,
    startOver: () => {
      setStanding(null);
      setRefused([]);
      clear();
    },
    errorAt: (field: string): string | undefined => serverErrors.find((refusal) => refusal.field === field)?.message,
    errorsElsewhere: [...new Set(serverErrors.filter(({ field }) => !field).map(({ message }) => message))],
    words: ({ key, params }: Complaint): string => (key ? t(key, params) : ''),
  };
}
export type RecordState = ReturnType<typeof useRecord>;

const isReused = (error: unknown): boolean => error instanceof Problem && error.code === 'idReused';

const reversalOf = ({ body, reverses }: BuiltGroup) => ({
  groupId: reverses?.reversalId ?? '',
  schema: 1 as const,
  reason: reverses?.reason ?? '',
  replacement: body,
});

const toPreview = (built: BuiltGroup): ToPreview =>
  built.reverses
    ? { is: 'reversal', groupId: built.reverses.groupId, body: reversalOf(built) }
    : { is: 'group', body: built.body };

const sameBody = (asked: ToPreview, built: BuiltGroup): boolean =>
  JSON.stringify(asked) === JSON.stringify(toPreview(built));

/** The value once it has not changed for a while; nothing to ask is known at once. */
function useSettled(value: ToPreview | null): ToPreview | null {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    if (value === null) {
      setSettled(null);
      return;
    }
    const timer = setTimeout(() => setSettled(value), SETTLES_MS);
    return () => clearTimeout(timer);
  }, [value]);
  return settled;
}
