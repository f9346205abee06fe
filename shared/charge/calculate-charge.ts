import { done, type Outcome, type Refusal } from '../problems/outcome.ts';
import type { ReferenceData } from '../reference/reference-data.ts';
import { roundTo, roundToStep, snap12 } from '../units/round.ts';
import { cautionsFor } from './cautions.ts';
import type { ChargeBasis, ChargeRequest } from './charge.schema.ts';
import type { ChargeResult, ChargeStep, ChargeWarning, SourceCode } from './charge-result.ts';
import type { CompileFormula } from './formula-contract.ts';
import { checkHeights, checkLengths, checkTotalCharge } from './limits.ts';
import { lineCharge } from './line-charge.ts';
import { type LineSet, readLineSet } from './line-set.ts';
import { pipeSizes } from './pipe-size.ts';
import { readRule } from './rate.ts';
import { judgeRate } from './rate-plausibility.ts';
import { findRefrigerantFacts, type RefrigerantFacts } from './refrigerant-facts.ts';
import { difference, grams, note, plain, rounded, snapped, sumText, type Trace, total } from './steps.ts';

export interface ChargeContext {
  reference: ReferenceData;
  /** Needed for the formula rate only: `compileFormula` of `formula.ts`. Kept out of here because its parser is heavy. */
  compileFormula?: CompileFormula | undefined;
}

/**
 * How much refrigerant to weigh in (or recover) for this line set by what the manual says, in g.
 *
 * It refuses to guess: a length or height outside the limits, a size without a rate, brackets that end short or out of
 * order, mixed sizes under one shared pre-charged length without the manual's order, an unknown name in a formula, a
 * total above the largest charge. Every refusal found is returned, and then no figure. A value equal to a limit passes.
 */
export function calculateCharge(request: ChargeRequest, context: ChargeContext): Outcome<ChargeResult> {
  const { basis } = request;
  const refusals: Refusal[] = [];
  const warnings: ChargeWarning[] = [];
  const steps: ChargeStep[] = [];
  /** Keeps the refusals of one part and goes on with the next, so that a person sees them all at once. */
  const take = <T>(outcome: Outcome<T>): T | null => {
    if (outcome.ok) return outcome.value;
    refusals.push(...outcome.refusals);
    return null;
  };

  const facts = findRefrigerantFacts(context.reference, basis.refrigerant);
  if (!facts) {
    const params = { given: basis.refrigerant };
    refusals.push({ code: 'unknownRefrigerant', path: '/basis/refrigerant', ...params, params });
  }
  const sizes = pipeSizes(context.reference.tubes);
  const rule = take(readRule(basis, { sizes, compileFormula: context.compileFormula, warnings }));
  const lineSet = take(readLineSet(request.lineSet, '/lineSet', sizes));
  const changes = request.job === 'lineSetChange';
  let previous: LineSet | null = null;
  if (changes && request.previousLineSet)
    previous = take(readLineSet(request.previousLineSet, '/previousLineSet', sizes));
  else if (changes) refusals.push({ code: 'previousLineSetMissing', path: '/previousLineSet', given: null });
  else if (request.previousLineSet) warnings.push({ code: 'previousLineSetNotUsed', params: {} });

  const limits = basis.limits ?? {};
  if (lineSet) {
    refusals.push(...checkLengths(lineSet, limits));
    const heights = checkHeights(lineSet, limits);
    refusals.push(...heights.refusals);
    warnings.push(...heights.warnings);
    if (rule?.precharge?.scope === 'branch') warnAboutMains(lineSet, rule.precharge.lengthM, warnings);
  }
  if (previous) refusals.push(...checkLengths(previous, limits));

  const refuse = (): Outcome<never> => ({ ok: false, refusals: withoutRepeats(refusals) });
  if (!rule) return refuse();
  const newTrace: Trace = { steps, of: null };
  const lineG = lineSet && take(lineCharge(lineSet, rule, newTrace, warnings));
  const newG = lineG === null ? null : withAllowances(lineG, basis, newTrace);
  let previousG: number | null = null;
  if (previous) {
    const trace: Trace = { steps, of: 'previousLineSet' };
    const previousLineG = take(lineCharge(previous, rule, trace, warnings));
    if (previousLineG !== null) previousG = withAllowances(previousLineG, basis, trace);
  }
  if (newG === null || (changes && previousG === null)) return refuse();

  const figures = weigh(request, newG, previousG, newTrace);
  if (figures.totalG < 0) {
    const params = { given: basis.factoryChargeG, extraG: figures.newExtraG, allowed: -figures.newExtraG };
    refusals.push({
      code: 'totalBelowZero',
      path: '/basis/factoryChargeG',
      given: params.given,
      allowed: params.allowed,
      params,
    });
  }
  refusals.push(...checkTotalCharge(figures.totalG, limits));
  if (refusals.length > 0 || !facts || !lineSet) return refuse();

  const co2eT = co2Equivalent(figures.totalG, request, facts, newTrace, warnings);
  const ratePlausibility = judgeRate(lineSet, rule.rate, facts, newTrace, warnings);
  return done({
    extraG: figures.extraG,
    totalG: figures.totalG,
    weighInG: figures.weighInG,
    recoverG: figures.recoverG,
    co2eT,
    gwpSet: request.gwpSet,
    ratePlausibility,
    steps,
    warnings: withoutRepeats(warnings),
    cautions: cautionsFor(request, facts, figures),
    versions: { ...facts.versions },
  });
}

/** Unrounded: the one rounding comes after everything is added up. */
function withAllowances(lineG: number, basis: ChargeBasis, trace: Trace): number {
  const terms = [lineG];
  for (const { label, gEach, count, factor } of basis.allowances ?? []) {
    const times = factor ?? 1;
    const text = `${count} x ${grams(gEach)}${times === 1 ? '' : ` x ${plain(times)}`}`;
    const allowanceG = snapped(count * gEach * times);
    terms.push(note(trace, 'allowance', text, allowanceG, 'g', 'allowances', { label }));
  }
  if (terms.length === 1) return lineG;
  return note(trace, 'extra', sumText(terms, grams), total(terms), 'g', 'arithmetic');
}

interface Figures {
  extraG: number;
  newExtraG: number;
  totalG: number;
  weighInG: number;
  recoverG: number;
}

function weigh(request: ChargeRequest, newG: number, previousG: number | null, trace: Trace): Figures {
  const { basis, job } = request;
  const round = (massG: number) => roundCharge(massG, basis.rounding ?? null, trace);
  let extraG: number;
  let newExtraG: number;
  if (previousG === null) {
    extraG = round(newG);
    newExtraG = extraG;
  } else {
    const text = sumText([newG, -previousG], grams);
    extraG = round(note(trace, 'change', text, difference(newG, previousG), 'g', 'arithmetic'));
    newExtraG = round(newG);
  }
  const sum = rounded(total([basis.factoryChargeG, newExtraG]), 3);
  const totalG = note(trace, 'total', sumText([basis.factoryChargeG, newExtraG], grams), sum, 'g', 'factoryCharge');
  const isWhole = job === 'fullRecharge';
  return {
    extraG,
    newExtraG,
    totalG,
    weighInG: isWhole ? Math.max(0, totalG) : Math.max(0, extraG),
    recoverG: isWhole ? 0 : Math.max(0, -extraG) + 0,
  };
}

const ROUNDING_NAMES = { nearest: 'round', up: 'ceil', down: 'floor' } as const;

function roundCharge(massG: number, rounding: NonNullable<ChargeBasis['rounding']> | null, trace: Trace): number {
  if (!rounding) return rounded(massG, 3);
  const { toG, direction } = rounding;
  const value = rounded(roundToStep(massG, toG, direction), 3);
  const text = `${ROUNDING_NAMES[direction]}(${grams(massG)} / ${grams(toG)}) x ${grams(toG)}`;
  return note(trace, 'rounded', text, value, 'g', 'rounding');
}

/** t: kg x GWP / 1000. null where the set has no value for the refrigerant: the charge is right all the same. */
function co2Equivalent(
  totalG: number,
  { gwpSet, basis }: ChargeRequest,
  facts: RefrigerantFacts,
  trace: Trace,
  warnings: ChargeWarning[],
): number | null {
  const found = facts.gwp(gwpSet);
  const named = { refrigerant: basis.refrigerant, gwpSet };
  if (!found.ok) {
    warnings.push({ code: 'gwpNotCovered', params: named });
    return null;
  }
  const { gwp, terms, leftOut, status } = found.value;
  if (leftOut.length > 0) warnings.push({ code: 'gwpPartly', params: { ...named, leftOut: leftOut.join(', ') } });
  if (status === 'memory') warnings.push({ code: 'gwpToBeConfirmed', params: named });
  const massKg = snap12(totalG / 1000);
  const tonnes = roundTo((massKg * gwp) / 1000, 5);
  const text = `${plain(massKg)} kg x ${plain(gwp)} / 1000`;
  const cited = { terms: terms || '0', leftOut: leftOut.join(', ') };
  return note(trace, 'co2e', text, tonnes, 't', sourceOf(gwpSet, leftOut.length > 0), { gwpSet }, cited);
}

/** IPCC reports give every component a value: only the laws leave some out. */
function sourceOf(set: ChargeRequest['gwpSet'], isPartly: boolean): SourceCode {
  return isPartly && set !== 'AR4' && set !== 'AR5' && set !== 'AR6' ? `gwpPartly.${set}` : `gwp.${set}`;
}

/** The manual's "each branch" may or may not mean the pipe that several branches share: say how it was read. */
function warnAboutMains(lineSet: LineSet, lengthM: number, warnings: ChargeWarning[]): void {
  const mains = lineSet.branches.filter((branch) => branch.hasChildren);
  if (mains.length === 0 || lengthM === 0) return;
  const params = { branches: mains.map((main) => main.name).join(', '), lengthM };
  warnings.push({ code: 'mainHasOwnPrecharge', params });
}

/** Two line sets under one rule meet the same obstacle twice. */
function withoutRepeats<T extends ChargeWarning | Refusal>(list: readonly T[]): T[] {
  if (list.length < 2) return [...list];
  const told = new Set<string>();
  return list.filter((item) => {
    const text = JSON.stringify(item);
    return told.has(text) ? false : told.add(text);
  });
}
