import { done, type Outcome, type Refusal } from '../problems/outcome.ts';
import type { ChargeBasis } from './charge.schema.ts';
import type { ChargeWarning } from './charge-result.ts';
import type { CompiledFormula, CompileFormula } from './formula-contract.ts';
import type { PipeSize, PipeSizes } from './pipe-size.ts';
import { snapped } from './steps.ts';

/** A charge basis whose rate and pre-charge make sense by themselves, before any line set is held against them. */
export interface Rule {
  rate:
    | { kind: 'flat'; gPerM: number }
    | { kind: 'byLiquidPipe'; gPerM: ReadonlyMap<PipeSize, number>; odsMm: readonly number[] }
    | { kind: 'stepped'; steps: readonly { upToM: number; extraG: number }[] }
    | { kind: 'formula'; formula: CompiledFormula; expression: string; sizes: PipeSizes }
    | { kind: 'fixedMass'; extraG: number };
  precharge: NonNullable<ChargeBasis['precharge']> | null;
  mayRemove: boolean;
}

export interface RuleContext {
  sizes: PipeSizes;
  compileFormula?: CompileFormula | undefined;
  warnings: ChargeWarning[];
}

export function readRule(basis: ChargeBasis, context: RuleContext): Outcome<Rule> {
  const refusals: Refusal[] = [];
  const precharge = basis.precharge ?? null;
  const { rate } = basis;
  if (precharge && rate.kind === 'stepped') {
    refusals.push({ code: 'prechargeWithBrackets', path: '/basis/precharge', given: precharge.scope, allowed: null });
  }
  if (precharge && rate.kind === 'fixedMass') {
    if (precharge.scope === 'mass') {
      refusals.push({
        code: 'prechargeWithFixedMass',
        path: '/basis/precharge',
        given: precharge.scope,
        allowed: null,
      });
    } else context.warnings.push({ code: 'prechargeNotUsed', params: {} });
  }
  const read = readRate(rate, context);
  if (!read.ok) refusals.push(...read.refusals);
  if (!read.ok || refusals.length > 0) return { ok: false, refusals };
  return done({ rate: read.value, precharge, mayRemove: basis.shortLine === 'remove' });
}

function readRate(rate: ChargeBasis['rate'], context: RuleContext): Outcome<Rule['rate']> {
  switch (rate.kind) {
    case 'flat':
    case 'fixedMass':
      return done(rate);
    case 'byLiquidPipe':
      return readSizes(rate.sizes, context.sizes);
    case 'stepped':
      return readBrackets(rate.steps);
    case 'formula':
      return readFormula(rate.expression, context);
  }
}

function readSizes(given: readonly { liquidOdMm: number; gPerM: number }[], sizes: PipeSizes): Outcome<Rule['rate']> {
  const refusals: Refusal[] = [];
  const gPerM = new Map<PipeSize, number>();
  for (const [index, row] of given.entries()) {
    const path = `/basis/rate/sizes/${index}/liquidOdMm`;
    const size = sizes.find(row.liquidOdMm);
    if (!size) refusals.push(odNotNominal(path, row.liquidOdMm, sizes));
    else if (gPerM.has(size)) {
      const params = { given: row.liquidOdMm, nominalMm: size.odMm };
      refusals.push({ code: 'sizeTwice', path, given: row.liquidOdMm, params });
    } else gPerM.set(size, row.gPerM);
  }
  const odsMm = given.map((row) => row.liquidOdMm);
  return refusals.length > 0 ? { ok: false, refusals } : done({ kind: 'byLiquidPipe', gPerM, odsMm });
}

export function odNotNominal(path: string, odMm: number, sizes: PipeSizes): Refusal {
  const params = { given: odMm, allowed: sizes.odsMm.join(', ') };
  return { code: 'odNotNominal', path, given: odMm, allowed: sizes.odsMm, params };
}

function readBrackets(steps: readonly { upToM: number; extraG: number }[]): Outcome<Rule['rate']> {
  const refusals: Refusal[] = [];
  for (let i = 1; i < steps.length; i++) {
    const before = snapped(steps[i - 1]?.upToM ?? 0);
    const given = snapped(steps[i]?.upToM ?? 0);
    if (given <= before) {
      refusals.push({
        code: 'bracketsNotAscending',
        path: `/basis/rate/steps/${i}/upToM`,
        given,
        allowed: before,
        params: { given, allowed: before },
      });
    }
  }
  return refusals.length > 0 ? { ok: false, refusals } : done({ kind: 'stepped', steps });
}

const declaredNames = new WeakMap<PipeSizes, ReadonlySet<string>>();

function readFormula(expression: string, context: RuleContext): Outcome<Rule['rate']> {
  const { sizes, compileFormula, warnings } = context;
  // Forgetting to load the parser is a bug of the caller, not something that a person can put right.
  if (!compileFormula) throw new Error('A formula rate needs compileFormula in the context');
  let declared = declaredNames.get(sizes);
  if (!declared) {
    declared = new Set(['L', 'N', 'Lp', ...sizes.names]);
    declaredNames.set(sizes, declared);
  }
  const compiled = compileFormula(expression, declared);
  if (!compiled.ok) return compiled;
  const formula = compiled.value;
  if (formula.digitsAroundComma !== null) {
    warnings.push({ code: 'commaInFormula', params: { given: formula.digitsAroundComma } });
  }
  return done({ kind: 'formula', formula, expression, sizes });
}
