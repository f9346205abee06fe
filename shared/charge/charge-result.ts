import type { MessageParams } from '../calculations/say-messages.ts';
import type { GwpSet } from '../reference/gwp.ts';
import type { ChargeResponse } from './charge.schema.ts';

export type StepUnit = ChargeResponse['steps'][number]['unit'];

/** Keys of the catalogue under `step.` */
export const STEP_CODES = [
  'totalLength',
  'sizeLength',
  'sharedLength',
  'lengthBeyond',
  'sizeLengthBeyond',
  'lineCharge',
  'sizeCharge',
  'branchCharge',
  'lineSum',
  'creditedMass',
  'bracket',
  'formulaName',
  'formula',
  'fixedMass',
  'clamp',
  'allowance',
  'extra',
  'rounded',
  'change',
  'total',
  'co2e',
  'pipeContent',
] as const;
export type StepCode = (typeof STEP_CODES)[number];

/** Keys of the catalogue under `source.` */
export const SOURCE_CODES = [
  'lineSet',
  'precharge',
  'rate',
  'makersLetter',
  'shortLine',
  'allowances',
  'rounding',
  'factoryCharge',
  'arithmetic',
  'tube',
  // By the set of values; `gwpPartly` where it leaves out what it has no value for.
  'gwp.AR4',
  'gwp.AR5',
  'gwp.AR6',
  'gwp.US-AIM',
  'gwp.US-84.64',
  'gwp.EU-2024-573',
  'gwpPartly.US-AIM',
  'gwpPartly.US-84.64',
  'gwpPartly.EU-2024-573',
] as const;
export type SourceCode = (typeof SOURCE_CODES)[number];

export interface ChargeStep {
  code: StepCode;
  params: MessageParams;
  /** The line set that a step is about; null: the whole. */
  of: 'previousLineSet' | null;
  /** Can be checked with a pencil: `12.0 m - 7.5 m`. */
  expression: string;
  value: number;
  unit: StepUnit;
  source: { code: SourceCode; params: MessageParams };
}

/** Keys of the catalogue under `warning.` */
export const WARNING_CODES = [
  'rateTooLow',
  'rateTooHigh',
  'plausibilityDoubtful',
  'plausibilityNotKnown',
  'plausibilityNotKnownForSize',
  'riseNotChecked',
  'previousLineSetNotUsed',
  'prechargeNotUsed',
  'mainHasOwnPrecharge',
  'sizeNotInFormula',
  'commaInFormula',
  'clampedAtZero',
  'gwpNotCovered',
  'gwpPartly',
  'gwpToBeConfirmed',
] as const;
export type WarningCode = (typeof WARNING_CODES)[number];
export interface ChargeWarning {
  code: WarningCode;
  params: MessageParams;
}

/** Keys of the catalogue under `caution.` */
export const CAUTION_CODES = [
  'highlyFlammable',
  'flammable',
  'toxic',
  'roomCheckNeeded',
  'roomCheckNeededToBeConfirmed',
  'noRoomCheck',
  'noRoomCheckToBeConfirmed',
  'roomByLocalCode',
  'recoverNeverVent',
  'compressorUnderVacuum',
  'blendAsLiquid',
  'frostbite',
  'rateForThisRefrigerant',
  'manualGoverns',
] as const;
export type CautionCode = (typeof CAUTION_CODES)[number];
export type CautionSignal = ChargeResponse['cautions'][number]['signal'];
export interface ChargeCaution {
  code: CautionCode;
  signal: CautionSignal;
  params: MessageParams;
}

/** The result with codes in place of sentences: `present-charge.ts` says them in a language. */
export interface ChargeResult {
  extraG: number;
  totalG: number;
  weighInG: number;
  recoverG: number;
  co2eT: number | null;
  gwpSet: GwpSet;
  ratePlausibility: ChargeResponse['ratePlausibility'];
  steps: ChargeStep[];
  warnings: ChargeWarning[];
  cautions: ChargeCaution[];
  versions: Record<string, string>;
}
