import { z } from 'zod';
import table from '../../data/cylinder-filling.json';

const source = { clause: z.string().min(1).nullable(), source: z.string().min(1), note: z.string().min(1) };

/** `data/cylinder-filling.json`: what a cylinder may be filled with, so small that a phone without signal has it. */
export const fillingTable = z.strictObject({
  version: z.string(),
  pressureRules: z.array(
    z.strictObject({
      jurisdiction: z.enum(['US', 'EU']),
      /** The pressure at `atTempC` may be this many times the stamped service pressure, both gauge. */
      serviceFactor: z.number().min(1),
      atTempC: z.number(),
      /** Refrigerants that the rule does not judge. */
      except: z.array(z.string()),
      status: z.enum(['yes', 'practice']),
      ...source,
    }),
  ),
  retest: z.strictObject({ status: z.literal('yes'), ...source }),
  figures: z.array(
    z.strictObject({
      refrigerant: z.string(),
      /** From the saturation table; null where it has no liquid there. */
      liquidDensityKgM3At25C: z.number().nullable(),
      bubbleKPaAbsAt55C: z.number().nullable(),
    }),
  ),
});
type FillingTable = z.output<typeof fillingTable>;
export type PressureRule = FillingTable['pressureRules'][number];
export type FillJurisdiction = PressureRule['jurisdiction'];

const { pressureRules, figures } = table as FillingTable;
const byRefrigerant = new Map(figures.map((row) => [row.refrigerant, row]));

export const findFillFigures = (refrigerant: string): FillingTable['figures'][number] | null =>
  byRefrigerant.get(refrigerant) ?? null;

/** The rule where a cylinder is filled; where that is not known the one that allows least. */
export function pressureRule(jurisdiction: FillJurisdiction | null): PressureRule {
  const strictest = pressureRules.toSorted((a, b) => a.serviceFactor - b.serviceFactor)[0];
  const rule = pressureRules.find((row) => row.jurisdiction === jurisdiction) ?? strictest;
  if (!rule) throw new Error('data/cylinder-filling.json has no pressure rule');
  return rule;
}
