import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button, ButtonLink } from '../../ui/button.tsx';
import { FieldError } from '../../ui/field.tsx';
import { useFocusFirstError } from '../../ui/focus-first-error.ts';
import { Notice, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { Steps } from '../../ui/steps.tsx';
import type { RecordForm } from './form.ts';
import { PreviewPanel } from './preview-panel.tsx';
import { QuestionView } from './question-view.tsx';
import { UnitChanges } from './unit-changes.tsx';
import { type RecordState, useRecord } from './use-record.ts';

interface Props {
  form: RecordForm;
  begin: { unitId: string; cylinderId: string };
  onPosted: (about: { groupId: string; unitId: string; cylinderId: string }) => void;
}

/** On a phone one question a screen and the preview at the end; on a desk one sheet with the preview beside it. */
export function RecordSheet({ form, begin, onPosted }: Props) {
  const isDesk = useMedia('(min-width: 64rem)');
  const record = useRecord(form, begin);
  const post = () => {
    const { answers, built } = record;
    void record.send(() =>
      onPosted({
        groupId: form.onlyRegister ? '' : (built.reverses?.reversalId ?? built.body.groupId),
        unitId: form.about === 'unit' ? answers.unitId : '',
        cylinderId: form.about === 'cylinder' ? (answers.rows[0]?.cylinderId ?? '') : '',
      }),
    );
  };
  const props = { form, record, post };
  // Started over, it begins at the first question, and nothing has been tried yet.
  const key = record.answers.ids.group;
  return isDesk ? <OneSheet key={key} {...props} /> : <OneByOne key={key} {...props} />;
}

interface Parts {
  form: RecordForm;
  record: RecordState;
  post: () => void;
}

const hasReason = (record: RecordState) =>
  (record.preview?.data?.reasons.length ?? 0) === 0 || record.answers.reason.trim() !== '';

function OneSheet({ form, record, post }: Parts) {
  const t = useMessages();
  const [tried, setTried] = useState(0);
  const [first, setFirst] = useState<readonly unknown[]>([]);
  useFocusFirstError(first);
  const go = () => {
    setTried((times) => times + 1);
    if (!record.isWhole || !hasReason(record)) setFirst([{}]);
    else if (record.isShown) post();
  };
  return (
    <Page title={t(`record.form.${form.kind}`)} lead={t(`record.form.${form.kind}.lead`)}>
      <form
        noValidate
        className="page-gutter grid w-full max-w-[90rem] gap-x-14 gap-y-8 pt-5 lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]"
        onSubmit={(event) => {
          event.preventDefault();
          go();
        }}
      >
        <div className="flex min-w-0 flex-col gap-8">
          {record.questions.map((question, index) => (
            <QuestionView
              key={question.id}
              question={question}
              answers={record.answers}
              context={record.context}
              change={record.change}
              error={(field) => sentenceAt(record, index, field, tried > 0)}
            />
          ))}
        </div>
        <div className="flex min-w-0 flex-col gap-5 lg:sticky lg:top-20 lg:self-start">
          <Review form={form} record={record} tried={tried > 0} />
          {record.nothing ? null : (
            <Button kind="act" wide type="submit" busy={record.isSending || record.isWaiting}>
              {t(form.onlyRegister ? 'record.enter' : 'record.post')}
            </Button>
          )}
          <Governs />
        </div>
      </form>
    </Page>
  );
}

function OneByOne({ form, record, post }: Parts) {
  const t = useMessages();
  const navigate = useNavigate();
  const [step, setStep] = useState(0);
  const [tried, setTried] = useState(false);
  const [first, setFirst] = useState<readonly unknown[]>([]);
  useFocusFirstError(first);
  const { questions, complaints } = record;
  const at = Math.min(step, questions.length);
  const question = questions[at];
  const move = (to: number) => {
    setTried(false);
    setStep(to);
    window.scrollTo?.({ top: 0 });
  };
  const next = () => {
    if (question) {
      if ((complaints[at] ?? []).length === 0) return move(at + 1);
      setTried(true);
      setFirst([{}]);
      return;
    }
    setTried(true);
    const open = complaints.findIndex((found) => found.length > 0);
    if (open >= 0) move(open);
    else if (!hasReason(record)) setFirst([{}]);
    else if (record.isShown) post();
  };
  const isReview = question === undefined;
  return (
    <Page
      field
      title={t(`record.form.${form.kind}`)}
      back={{
        label: t('record.back'),
        onPress: () => (at === 0 ? navigate(-1) : move(at - 1)),
      }}
      status={t('record.step', { step: at + 1, count: questions.length + 1 })}
      next={
        isReview && record.nothing ? undefined : (
          <Button kind="act" wide onClick={next} busy={isReview && (record.isSending || record.isWaiting)}>
            {t(isReview ? (form.onlyRegister ? 'record.enter' : 'record.post') : 'record.next')}
          </Button>
        )
      }
    >
      <Steps step={at + 1} count={questions.length + 1} />
      <form
        noValidate
        className="page-gutter flex max-w-2xl flex-col gap-5 pt-4"
        onSubmit={(event) => {
          event.preventDefault();
          next();
        }}
      >
        {at === 0 ? <p className="text-ink-soft">{t(`record.form.${form.kind}.lead`)}</p> : null}
        {question ? (
          <QuestionView
            key={question.id}
            question={question}
            answers={record.answers}
            context={record.context}
            change={record.change}
            error={(field) => sentenceAt(record, at, field, tried)}
          />
        ) : (
          <>
            <h2 className="text-[1.1875rem] font-[650]">
              {t(form.onlyRegister ? 'record.changes.title' : 'record.preview.title')}
            </h2>
            <Review form={form} record={record} tried={tried} />
            <Governs />
          </>
        )}
      </form>
    </Page>
  );
}

/** Nothing is called missing before somebody has tried to go on; what the server refused is said at once. */
function sentenceAt(record: RecordState, index: number, field: string, tried: boolean): string | undefined {
  const own = (record.complaints[index] ?? []).find((complaint) => complaint.field === field);
  return (tried && own ? record.words(own) : undefined) || record.errorAt(field);
}

function Review({ form, record, tried }: { form: RecordForm; record: RecordState; tried: boolean }) {
  const t = useMessages();
  const { preview, nothing, isWhole } = record;
  const elsewhere = record.errorsElsewhere;
  return (
    <section
      aria-label={t(form.onlyRegister ? 'record.changes.title' : 'record.preview.title')}
      aria-live="polite"
      className="flex flex-col gap-4"
    >
      <h2 className="hidden text-[1.1875rem] font-[650] lg:block">
        {t(form.onlyRegister ? 'record.changes.title' : 'record.preview.title')}
      </h2>
      {nothing ? <Notice title={t('record.nothing')}>{t(nothing)}</Notice> : null}
      {!isWhole && !nothing ? <p className="text-ink-soft">{t('record.preview.notYet')}</p> : null}
      {record.isWaiting && !preview?.data ? <RowsSkeleton rows={4} /> : null}
      {isWhole && record.changes.length > 0 ? (
        <UnitChanges changes={record.changes} answers={record.answers} context={record.context} />
      ) : null}
      {preview?.data ? (
        <PreviewPanel
          preview={preview.data}
          kind={record.built.body.kind}
          answers={record.answers}
          context={record.context}
          change={record.change}
          reasonError={record.errorAt('reason') ?? (tried && !hasReason(record) ? t('record.need.reason') : undefined)}
        />
      ) : null}
      {record.standing ? <Standing groupId={record.standing} startOver={record.startOver} /> : null}
      {elsewhere.map((message) => (
        <FieldError key={message}>{message}</FieldError>
      ))}
      {form.kind === 'invoice' && record.built.reverses ? <Notice>{t('record.invoice.differs')}</Notice> : null}
    </section>
  );
}

/** An earlier try was recorded although its answer got lost: what was typed since is in no log. */
function Standing({ groupId, startOver }: { groupId: string; startOver: () => void }) {
  const t = useMessages();
  return (
    <Notice role="alert" title={t('record.standing')}>
      <p>{t('record.standing.text')}</p>
      <div className="flex flex-wrap gap-x-6">
        <ButtonLink kind="quiet" to={`/log/${groupId}`}>
          {t('record.standing.show')}
        </ButtonLink>
        <Button kind="quiet" onClick={startOver}>
          {t('record.standing.startOver')}
        </Button>
      </div>
    </Notice>
  );
}

/** Who has the last word on this work. */
function Governs() {
  const t = useMessages();
  return <p className="text-[0.9375rem] leading-snug text-ink-soft">{t('record.governs')}</p>;
}
