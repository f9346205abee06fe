import type { Answers, FormContext } from './answers.ts';
import type { Question } from './form.ts';

/** What every question is handed. `error` gives the sentence to show at a blank, if there is one. */
export interface QuestionProps<Q extends Question = Question> {
  question: Q;
  answers: Answers;
  context: FormContext;
  change: (part: Partial<Answers>) => void;
  error: (field: string) => string | undefined;
}
export type Of<Is extends Question['is']> = QuestionProps<Extract<Question, { is: Is }>>;
