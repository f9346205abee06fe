import type { ReactNode } from 'react';
import { useMessages } from '../../lib/messages.ts';
import { Caution } from '../../ui/caution.tsx';
import type { QuestionProps } from './question-props.ts';
import { LevelQuestion } from './questions/level-question.tsx';
import { CertifiedQuestion, PurchaseQuestion } from './questions/paper-questions.tsx';
import {
  ChoiceQuestion,
  DocumentQuestion,
  FullnessQuestion,
  MassQuestion,
  MomentQuestion,
  PartyQuestion,
  ReasonQuestion,
  TextQuestion,
} from './questions/plain-questions.tsx';
import { RowsQuestion } from './questions/rows-question.tsx';
import {
  EmptiedQuestion,
  FullChargeQuestion,
  RefrigerantQuestion,
  SiteQuestion,
} from './questions/unit-change-questions.tsx';
import { UnitQuestion } from './questions/unit-question.tsx';

/** One question with the hazards that are met there, under its own heading. */
export function QuestionView(props: QuestionProps) {
  const t = useMessages();
  const { question } = props;
  const heading = `question-${question.id}`;
  return (
    <section aria-labelledby={heading} className="flex flex-col gap-3">
      <h2 id={heading} className="text-[1.1875rem] leading-tight font-[650]">
        {t(`record.ask.${question.id}`)}
      </h2>
      {(question.cautions ?? []).map(({ signal, key }) => (
        <Caution key={key} signal={signal}>
          {t(key)}
        </Caution>
      ))}
      {blanks(props)}
    </section>
  );
}

function blanks({ question, ...rest }: QuestionProps): ReactNode {
  switch (question.is) {
    case 'unit':
      return <UnitQuestion question={question} {...rest} />;
    case 'choice':
      return <ChoiceQuestion question={question} {...rest} />;
    case 'site':
      return <SiteQuestion question={question} {...rest} />;
    case 'emptied':
      return <EmptiedQuestion question={question} {...rest} />;
    case 'refrigerant':
      return <RefrigerantQuestion question={question} {...rest} />;
    case 'fullCharge':
      return <FullChargeQuestion question={question} {...rest} />;
    case 'rows':
      return <RowsQuestion question={question} {...rest} />;
    case 'mass':
      return <MassQuestion question={question} {...rest} />;
    case 'party':
      return <PartyQuestion question={question} {...rest} />;
    case 'document':
      return <DocumentQuestion question={question} {...rest} />;
    case 'certified':
      return <CertifiedQuestion question={question} {...rest} />;
    case 'level':
      return <LevelQuestion question={question} {...rest} />;
    case 'purchase':
      return <PurchaseQuestion question={question} {...rest} />;
    case 'reason':
      return <ReasonQuestion question={question} {...rest} />;
    case 'text':
      return <TextQuestion question={question} {...rest} />;
    case 'moment':
      return <MomentQuestion question={question} {...rest} />;
    case 'fullness':
      return <FullnessQuestion question={question} {...rest} />;
  }
}
