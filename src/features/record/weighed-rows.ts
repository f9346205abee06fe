import type { TypedMass } from '../../../shared/units/mass.ts';
import { type FormContext, typedOf, type WeighedRow } from './answers.ts';
import { difference, sum, sumOfTerms, typedGrams, withoutSign } from './typed-mass.ts';

/** What the hose held, where there was one; null: none, or not typed yet. */
export const hoseOf = (row: WeighedRow, context: FormContext): TypedMass | null =>
  row.hasHose ? typedOf(row.hose, context) : null;

/** What came into the cylinder by its own readings; below zero: more left. */
export function massInto(row: WeighedRow, context: FormContext): TypedMass | null {
  const after = typedOf(row.after, context);
  if (row.mode === 'zeroed') return after && withoutSign(after);
  const before = typedOf(row.before, context);
  return before && after && difference(after, before);
}

/**
 * What left the cylinder for where it was meant to go. A hose that was full at the start reading is content of the
 * cylinder; what the hose held in the end is left out where it went elsewhere (scenario 1 of the log works all four).
 */
export function massOutOf(row: WeighedRow, context: FormContext): TypedMass | null {
  const after = typedOf(row.after, context);
  if (!after) return null;
  const drop = row.mode === 'zeroed' ? withoutSign(after) : dropOf(row, after, context);
  const hose = hoseOf(row, context);
  if (!drop || !hose) return drop;
  const had = row.hoseFullAtStart ? sum(drop, hose) : drop;
  return row.hoseEnd === 'emptied' ? had : difference(had, hose);
}

function dropOf(row: WeighedRow, after: TypedMass, context: FormContext): TypedMass | null {
  const before = typedOf(row.before, context);
  return before && difference(before, after);
}

/** What a cylinder holds: its gross reading less its tare, or its book. */
export function contentOf(row: WeighedRow, context: FormContext): TypedMass | null {
  const cylinder = context.cylinder(row.cylinderId);
  if (!cylinder) return null;
  if (row.mode === 'book') return typedGrams(cylinder.contentG);
  const gross = typedOf(row.before, context);
  return (
    gross &&
    sumOfTerms([
      { sign: 1, mass: gross },
      { sign: -1, mass: cylinder.tareTyped as TypedMass },
    ])
  );
}
