import type { StoredChargeBasis } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import type { GwpSet } from '../../../shared/reference/gwp.ts';
import type { Locale } from '../../../shared/session/session.schema.ts';
import type { LineSet } from '../../../shared/unit-register/unit.schema.ts';
import type { QuantityKind, UnitOf } from '../../../shared/units/quantities.ts';
import { emptyQuantity, type QuantityDraft, quantityOf, quantityOfTyped } from '../../ui/quantity-draft.ts';
import { type ChargeDraft, emptyDraft, emptyPipe, type FieldUnits, type PipeDraft, rowKey } from './charge-draft.ts';
import { sizesOfPipe } from './reference-tables.ts';

export interface UnitOnRecord {
  refrigerant: string;
  /** What the manual says about this unit now; null: not recorded yet. */
  basis: StoredChargeBasis | null;
  /** How it is piped now; null: not recorded yet. */
  lineSet: LineSet | null;
}

/** The form filled from what is on record. What is not recorded stays empty, to be entered for this sheet. */
export function draftOfUnit(
  { refrigerant, basis, lineSet }: UnitOnRecord,
  units: FieldUnits,
  gwpSet: GwpSet,
  locale: Locale,
): ChargeDraft {
  const quantity = <Kind extends QuantityKind>(
    kind: Kind,
    base: number | null | undefined,
    unit: UnitOf<Kind>,
  ): QuantityDraft<Kind> =>
    base === null || base === undefined ? emptyQuantity(unit) : quantityOf(kind, base, unit, locale);
  const length = (base: number | null | undefined) => quantity('length', base, units.length);
  const mass = (base: number | null | undefined) => quantity('mass', base, units.mass);

  const draft: ChargeDraft = { ...emptyDraft(units, gwpSet), refrigerant };
  if (lineSet && lineSet.branches.length > 0) {
    draft.pipes = lineSet.branches.map(
      (branch): PipeDraft => ({
        ...emptyPipe(branch.name, units),
        parent: branch.parent ?? '',
        liquidOd: nominal(branch.liquidOdMm),
        gasOd: branch.gasOdMm == null ? '' : nominal(branch.gasOdMm),
        length: branch.typedLength ? quantityOfTyped('length', branch.typedLength, locale) : length(branch.lengthM),
        rise: length(branch.riseM),
        bends: branch.bends === 0 ? '' : String(branch.bends),
        equivalent: branch.equivalentMPerBend === 0 ? emptyQuantity(units.length) : length(branch.equivalentMPerBend),
      }),
    );
  }
  if (!basis) return draft;
  const { basis: rule, manual } = basis;
  const { precharge, rate, limits, rounding } = rule;
  return {
    ...draft,
    refrigerant: rule.refrigerant,
    factoryCharge: mass(rule.factoryChargeG),
    prechargeScope: precharge?.scope ?? 'system',
    // No pre-charge on record is a recorded nothing: 0, not an open question.
    prechargeLength: length(precharge && precharge.scope !== 'mass' ? precharge.lengthM : precharge ? null : 0),
    prechargeMass: mass(precharge?.scope === 'mass' ? precharge.massG : null),
    allocation: (precharge && precharge.scope !== 'mass' && precharge.allocation) || '',
    rateKind: rate.kind,
    rate: quantity('massPerLength', rate.kind === 'flat' ? rate.gPerM : null, units.rate),
    sizes:
      rate.kind === 'byLiquidPipe'
        ? rate.sizes.map((size) => ({
            key: rowKey(),
            od: nominal(size.liquidOdMm),
            rate: quantity('massPerLength', size.gPerM, units.rate),
          }))
        : [],
    brackets:
      rate.kind === 'stepped'
        ? rate.steps.map((step) => ({ key: rowKey(), upTo: length(step.upToM), extra: mass(step.extraG) }))
        : [],
    expression: rate.kind === 'formula' ? rate.expression : '',
    fixedMass: mass(rate.kind === 'fixedMass' ? rate.extraG : null),
    allowances: (rule.allowances ?? []).map((row) => ({
      key: rowKey(),
      label: row.label,
      each: mass(row.gEach),
      count: String(row.count),
      factor: row.factor == null || row.factor === 1 ? '' : String(row.factor),
    })),
    minLength: length(limits?.minLengthM),
    maxLength: length(limits?.maxLengthM),
    maxBranch: length(limits?.maxBranchM),
    maxRise: length(limits?.maxRiseM),
    maxDrop: length(limits?.maxDropM),
    maxTotal: mass(limits?.maxTotalChargeG),
    roundTo: quantity('mass', rounding?.toG, 'g'),
    roundDirection: rounding?.direction ?? 'nearest',
    shortLine: rule.shortLine ?? 'none',
    metering: rule.metering ?? 'unknown',
    document: manual.document,
    page: manual.page ?? '',
  };
}

/** 9.5, 9.525 and 9.53 mm are all the 9.52 mm of the list. */
const nominal = (odMm: number): string => String(sizesOfPipe.find(odMm)?.odMm ?? odMm);
