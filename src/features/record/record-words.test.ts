import { describe, expect, it } from 'vitest';
import en from '../../../shared/messages/record.en.json';
import { FORMS } from './all-forms.ts';
import { answersOf, contextOf } from './record.fixture.ts';

const known = new Set(Object.keys(en));

/** Every way through a form: with each of its closed answers, under the law that asks most. */
const ways = (options: readonly string[]) =>
  ['', ...options].map((choice) => ({
    answers: answersOf({ choice }),
    context: { ...contextOf('S13.1'), jurisdiction: 'US' },
  }));
const OPTIONS = ['completed', 'notCompleted', 'whole', 'lines', 'behindValves'];

describe.each(FORMS)('The form $kind', (form) => {
  it('has words for its name, every question, every answer and every caution', () => {
    const keys = ways(OPTIONS).flatMap(({ answers, context }) =>
      form
        .questions(answers, context)
        .flatMap((question) => [
          `record.ask.${question.id}`,
          ...(question.cautions ?? []).map(({ key }) => key),
          ...(question.is === 'choice'
            ? question.options.flatMap((option) => [`record.choice.${option}`, `record.choice.${option}.detail`])
            : []),
          ...(question.is === 'mass' ? [`record.mass.${question.id}`] : []),
          ...(question.is === 'text' ? [`record.text.${question.id}`] : []),
          ...(question.is === 'party' ? [`record.party.${question.of}`, `record.need.${question.of}`] : []),
        ]),
    );
    const wanted = [`record.form.${form.kind}`, `record.form.${form.kind}.lead`, ...keys];
    expect(wanted.filter((key) => !known.has(key))).toEqual([]);
  });

  it('asks each question once', () => {
    for (const { answers, context } of ways(OPTIONS)) {
      const ids = form.questions(answers, context).map(({ id }) => id);
      expect(new Set(ids).size).toBe(ids.length);
    }
  });
});
