import { done, type Outcome, refused } from '../problems/outcome.ts';
import type { ChargeWarning } from './charge-result.ts';
import { FORMULA_PATH } from './formula-contract.ts';
import { type LineSet, runsBySize } from './line-set.ts';
import { flatGroups, pipeCharge, sharedLengthM, sizeGroups } from './pipe-charge.ts';
import { odNotNominal, type Rule } from './rate.ts';
import { difference, grams, metres, note, plain, snapped, sumText, type Trace } from './steps.ts';

/**
 * The line part in g of one line set: what the pipe asks for by the manual's rate, less what the factory charge already
 * serves; not below zero unless the manual says remove. Not rounded.
 */
export function lineCharge(lineSet: LineSet, rule: Rule, trace: Trace, warnings: ChargeWarning[]): Outcome<number> {
  const asked = chargeByRate(lineSet, rule, trace, warnings);
  if (!asked.ok) return asked;
  let lineG = asked.value;
  // Of a formula too: a length reaches it as Lp, a mass cannot.
  if (rule.precharge?.scope === 'mass') {
    const creditedG = rule.precharge.massG;
    const text = `${grams(lineG)} - ${grams(creditedG)}`;
    lineG = note(trace, 'creditedMass', text, difference(lineG, creditedG), 'g', 'precharge');
  }
  // With `branch` each branch was clamped by itself, or with `remove` none is.
  if (lineG < 0 && !rule.mayRemove) {
    const isPlainLength = 'gPerM' in rule.rate && rule.precharge?.scope !== 'mass';
    if (!isPlainLength) warnings.push({ code: 'clampedAtZero', params: { lineG: Number(plain(lineG)) } });
    lineG = note(trace, 'clamp', `max(0 g, ${grams(lineG)})`, 0, 'g', 'shortLine');
  }
  return done(lineG);
}

function chargeByRate(lineSet: LineSet, rule: Rule, trace: Trace, warnings: ChargeWarning[]): Outcome<number> {
  const { rate } = rule;
  switch (rate.kind) {
    case 'flat':
      return pipeCharge(lineSet, flatGroups(lineSet, rate.gPerM), rule, trace);
    case 'byLiquidPipe': {
      const groups = sizeGroups(lineSet, rate);
      return groups.ok ? pipeCharge(lineSet, groups.value, rule, trace) : groups;
    }
    case 'stepped':
      return chargeByBracket(lineSet, rate.steps, trace);
    case 'formula':
      return chargeByFormula(lineSet, rate, rule.precharge, trace, warnings);
    case 'fixedMass':
      return done(note(trace, 'fixedMass', grams(rate.extraG), snapped(rate.extraG), 'g', 'makersLetter'));
  }
}

function chargeByBracket(
  lineSet: LineSet,
  steps: readonly { upToM: number; extraG: number }[],
  trace: Trace,
): Outcome<number> {
  const bracket = steps.find((step) => lineSet.totalM <= snapped(step.upToM));
  if (!bracket) {
    const params = { given: lineSet.totalM, allowed: steps.at(-1)?.upToM ?? 0 };
    return refused({ code: 'bracketsEndShort', path: `${lineSet.path}/branches`, ...params, params });
  }
  noteTotalLength(lineSet, trace);
  const text = `${metres(lineSet.totalM)} <= ${metres(bracket.upToM)}: ${grams(bracket.extraG)}`;
  return done(note(trace, 'bracket', text, snapped(bracket.extraG), 'g', 'rate'));
}

function noteTotalLength(lineSet: LineSet, trace: Trace): void {
  if (lineSet.branches.length < 2) return;
  note(trace, 'totalLength', sumText(lineSet.lengthsM, metres), lineSet.totalM, 'm', 'lineSet');
}

function chargeByFormula(
  lineSet: LineSet,
  rate: Extract<Rule['rate'], { kind: 'formula' }>,
  precharge: Rule['precharge'],
  trace: Trace,
  warnings: ChargeWarning[],
): Outcome<number> {
  const { formula, expression, sizes } = rate;
  const usesSizes = [...formula.names].some((name) => sizes.names.has(name));
  if (usesSizes) {
    const unnamed = lineSet.branches.filter((branch) => branch.size === null);
    // Such a length would be in no L635, L952, ... and silently be charged with nothing.
    const refusals = unnamed.map((branch) => odNotNominal(`${branch.path}/liquidOdMm`, branch.odMm, sizes));
    if (refusals.length > 0) return { ok: false, refusals };
  }

  const values = new Map<string, number>();
  const name = (symbol: string, text: () => string, value: number, unit: 'm' | '') => {
    values.set(symbol, value);
    if (formula.names.has(symbol)) note(trace, 'formulaName', text(), value, unit, 'lineSet', { name: symbol });
  };
  name('L', () => sumText(lineSet.lengthsM, metres), lineSet.totalM, 'm');
  name('N', () => String(lineSet.ends.length), lineSet.ends.length, '');
  if (formula.names.has('Lp')) {
    const hasLength = precharge && precharge.scope !== 'mass';
    const prechargedM = hasLength ? sharedLengthM(lineSet, precharge, trace) : 0;
    values.set('Lp', prechargedM);
    note(trace, 'formulaName', metres(prechargedM), prechargedM, 'm', 'precharge', { name: 'Lp' });
  } else if (precharge && precharge.scope !== 'mass') warnings.push({ code: 'prechargeNotUsed', params: {} });
  if (usesSizes) {
    for (const run of runsBySize(lineSet)) {
      name(run.size.name, () => sumText(run.lengthsM, metres), run.totalM, 'm');
      if (!formula.names.has(run.size.name) && !formula.names.has('L') && run.totalM > 0) {
        warnings.push({ code: 'sizeNotInFormula', params: { odMm: run.size.odMm, name: run.size.name } });
      }
    }
    for (const symbol of formula.names) {
      if (!values.has(symbol)) name(symbol, () => metres(0), 0, 'm');
    }
  }

  const value = formula.evaluate(values);
  if (value === null) {
    return refused({ code: 'formulaNoNumber', path: FORMULA_PATH, given: expression, params: { given: expression } });
  }
  return done(note(trace, 'formula', expression, value, 'g', 'rate'));
}
