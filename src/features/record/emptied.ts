import type { FormContext } from './answers.ts';

/** By its book: known, and nothing left in it. Whoever says so later has recovered, or pulled a vacuum on the whole circuit. */
export const isEmptied = ({ book }: Pick<NonNullable<FormContext['unit']>, 'book'>): boolean =>
  book.known && book.byRefrigerant.every(({ massG }) => massG === 0);
