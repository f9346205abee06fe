import type { ChargeBasis, ChargeRequest, LineSetRequest } from '../../../shared/charge/charge.schema.ts';
import type { QuantityKind } from '../../../shared/units/quantities.ts';
import { readNumber } from '../../../shared/units/read-number.ts';
import { type QuantityDraft, readQuantity } from '../../ui/quantity-draft.ts';
import { BOUNDS } from './bounds.ts';
import type { ChargeDraft, PipeDraft } from './charge-draft.ts';

/** A field by its place in the request (JSON Pointer), so that a refusal of the engine finds the field that it is about. */
export type Pointer = string;

export interface ReadDraft {
  /** null while something is missing or cannot be read. */
  request: ChargeRequest | null;
  /** Fields that have to be filled in, in the order of the screen. */
  missing: Pointer[];
  /** Fields that hold something which is no value; they say so themselves. */
  unreadable: Pointer[];
}

/** Turns what was typed into a request. Nothing is guessed: an empty field that counts is named, not taken as zero. */
export function readDraft(draft: ChargeDraft, locale: string): ReadDraft {
  const missing: Pointer[] = [];
  const unreadable: Pointer[] = [];

  interface Bounds {
    min?: number;
    max: number;
    signed?: boolean;
  }
  /** The value in the kind's base unit; null where the field is empty or unreadable. */
  const quantity = <Kind extends QuantityKind>(
    kind: Kind,
    field: QuantityDraft<Kind>,
    pointer: Pointer,
    needed: boolean,
    { min, max, signed = false }: Bounds,
  ): number | null => {
    const reading = readQuantity(kind, field, { locale, allowNegative: signed });
    if (reading.is === 'empty') {
      if (needed) missing.push(pointer);
      return null;
    }
    const least = min ?? (signed ? -max : 0);
    if (reading.is !== 'read' || reading.base < least || reading.base > max) {
      unreadable.push(pointer);
      return null;
    }
    return reading.base;
  };
  const length = (field: QuantityDraft<'length'>, pointer: Pointer, needed = false) =>
    quantity('length', field, pointer, needed, { max: BOUNDS.lengthM });
  const mass = (field: QuantityDraft<'mass'>, pointer: Pointer, needed = false, signed = false) =>
    quantity('mass', field, pointer, needed, { max: BOUNDS.massG, signed });
  const number = (text: string, pointer: Pointer, max: number, whole: boolean, needed = false): number | null => {
    if (text.trim() === '') {
      if (needed) missing.push(pointer);
      return null;
    }
    const value = readPlainNumber(text);
    if (value === null || value > max || (whole && !Number.isInteger(value))) {
      unreadable.push(pointer);
      return null;
    }
    return value;
  };
  const choice = (value: string, pointer: Pointer): number => {
    if (value === '') missing.push(pointer);
    return Number(value);
  };

  if (draft.refrigerant === '') missing.push('/basis/refrigerant');
  const factoryChargeG = mass(draft.factoryCharge, '/basis/factoryChargeG', true) ?? 0;
  const lineSet = readPipes(draft.pipes, '/lineSet', draft.rateKind !== 'fixedMass' || draft.pipes.length > 1);
  const precharge = readPrecharge();
  const rate = readRate();
  const previousLineSet =
    draft.job === 'lineSetChange' ? readPipes(draft.previousPipes, '/previousLineSet', true) : null;
  if (draft.job === 'lineSetChange' && draft.previousPipes.length === 0) missing.push('/previousLineSet');

  const allowances = draft.allowances.map((row, index) => {
    const at = `/basis/allowances/${index}`;
    const label = row.label.trim();
    if (label.length > BOUNDS.labelLength) unreadable.push(`${at}/label`);
    return {
      label: label || String(index + 1),
      gEach: mass(row.each, `${at}/gEach`, true, true) ?? 0,
      count: number(row.count, `${at}/count`, BOUNDS.count, true, true) ?? 0,
      factor: number(row.factor, `${at}/factor`, BOUNDS.factor, false) ?? 1,
    };
  });
  const limits = {
    minLengthM: length(draft.minLength, '/basis/limits/minLengthM'),
    maxLengthM: length(draft.maxLength, '/basis/limits/maxLengthM'),
    maxBranchM: length(draft.maxBranch, '/basis/limits/maxBranchM'),
    maxRiseM: length(draft.maxRise, '/basis/limits/maxRiseM'),
    maxDropM: length(draft.maxDrop, '/basis/limits/maxDropM'),
    maxTotalChargeG: mass(draft.maxTotal, '/basis/limits/maxTotalChargeG'),
  };
  const toG = quantity('mass', draft.roundTo, '/basis/rounding/toG', false, {
    min: BOUNDS.leastRoundingG,
    max: BOUNDS.roundingG,
  });

  const complete = missing.length === 0 && unreadable.length === 0;
  if (!complete || rate === null) return { request: null, missing, unreadable };
  const request: ChargeRequest = {
    job: draft.job,
    basis: {
      refrigerant: draft.refrigerant,
      factoryChargeG,
      precharge,
      rate,
      metering: draft.metering,
      allowances,
      limits,
      rounding: toG === null ? null : { toG, direction: draft.roundDirection },
      shortLine: draft.shortLine,
    },
    lineSet,
    previousLineSet,
    gwpSet: draft.gwpSet,
  };
  return { request, missing, unreadable };

  function readPrecharge(): ChargeBasis['precharge'] {
    // Brackets hold for the total length, and a maker's letter stands alone: neither asks for a pre-charged length.
    if (draft.rateKind === 'stepped' || draft.rateKind === 'fixedMass') return null;
    if (draft.prechargeScope === 'mass') {
      return { scope: 'mass', massG: mass(draft.prechargeMass, '/basis/precharge/massG', true) ?? 0 };
    }
    return {
      scope: draft.prechargeScope,
      lengthM: length(draft.prechargeLength, '/basis/precharge/lengthM', true) ?? 0,
      allocation: draft.allocation === '' ? null : draft.allocation,
    };
  }

  function readRate(): ChargeBasis['rate'] | null {
    const gPerM = (field: QuantityDraft<'massPerLength'>, pointer: Pointer) =>
      quantity('massPerLength', field, pointer, true, { max: BOUNDS.gPerM }) ?? 0;
    switch (draft.rateKind) {
      case 'flat':
        return { kind: 'flat', gPerM: gPerM(draft.rate, '/basis/rate/gPerM') };
      case 'byLiquidPipe':
        if (draft.sizes.length === 0) missing.push('/basis/rate/sizes');
        return {
          kind: 'byLiquidPipe',
          sizes: draft.sizes.map((row, index) => ({
            liquidOdMm: choice(row.od, `/basis/rate/sizes/${index}/liquidOdMm`),
            gPerM: gPerM(row.rate, `/basis/rate/sizes/${index}/gPerM`),
          })),
        };
      case 'stepped':
        if (draft.brackets.length === 0) missing.push('/basis/rate/steps');
        return {
          kind: 'stepped',
          steps: draft.brackets.map((row, index) => ({
            upToM: length(row.upTo, `/basis/rate/steps/${index}/upToM`, true) ?? 0,
            extraG: mass(row.extra, `/basis/rate/steps/${index}/extraG`, true, true) ?? 0,
          })),
        };
      case 'formula': {
        const expression = draft.expression.trim();
        if (expression === '') missing.push('/basis/rate/expression');
        return { kind: 'formula', expression };
      }
      case 'fixedMass':
        return { kind: 'fixedMass', extraG: mass(draft.fixedMass, '/basis/rate/extraG', true, true) ?? 0 };
    }
  }

  function readPipes(pipes: readonly PipeDraft[], at: Pointer, needed: boolean): LineSetRequest {
    return {
      branches: pipes.map((pipe, index) => {
        const here = `${at}/branches/${index}`;
        const name = pipe.name.trim();
        if (name === '') missing.push(`${here}/name`);
        else if (name.length > BOUNDS.nameLength) unreadable.push(`${here}/name`);
        return {
          name,
          parent: pipe.parent === '' ? null : pipe.parent,
          liquidOdMm: choice(pipe.liquidOd, `${here}/liquidOdMm`),
          gasOdMm: pipe.gasOd === '' ? null : Number(pipe.gasOd),
          lengthM: length(pipe.length, `${here}/lengthM`, needed) ?? 0,
          riseM: quantity('length', pipe.rise, `${here}/riseM`, false, { max: BOUNDS.riseM, signed: true }),
          bends: number(pipe.bends, `${here}/bends`, BOUNDS.count, true),
          equivalentMPerBend: quantity('length', pipe.equivalent, `${here}/equivalentMPerBend`, false, {
            max: BOUNDS.equivalentMPerBend,
          }),
        };
      }),
    };
  }
}

/** A number without a unit: decimal point or comma; a lone separator before three digits is taken as none. */
export function readPlainNumber(text: string): number | null {
  const read = readNumber(text);
  return read.is === 'number' ? Number(read.value) : null;
}
