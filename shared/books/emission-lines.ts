import type { AtmosphereKind } from '../ledger/place.ts';

/** A sum of the log: what went to the atmosphere of one refrigerant in one way, under one head. */
export interface EmissionSum {
  readonly key: string | null;
  readonly label: string | null;
  readonly refrigerant: string;
  readonly as: AtmosphereKind;
  /** Below zero: taken back. */
  readonly massMicrograms: bigint;
  readonly atLeastMicrograms: bigint;
}

export interface EmissionMasses {
  readonly measured: bigint;
  readonly inferred: bigint;
  readonly hose: bigint;
  readonly atLeast: bigint;
  readonly beforeOurCare: bigint;
}

export interface SummedLine extends EmissionMasses {
  readonly key: string | null;
  readonly label: string | null;
  readonly refrigerant: string;
}

const nothing: EmissionMasses = { measured: 0n, inferred: 0n, hose: 0n, atLeast: 0n, beforeOurCare: 0n };

/** What counts as our emission: without what was lost before our care. */
export const totalOf = ({ measured, inferred, hose }: EmissionMasses): bigint => measured + inferred + hose;

/** One line a head and refrigerant, in the order of the sums. "At least" is of our own losses. */
export function emissionLines(sums: readonly EmissionSum[]): SummedLine[] {
  const lines = new Map<string, SummedLine>();
  for (const { key, label, refrigerant, as, massMicrograms, atLeastMicrograms } of sums) {
    const id = `${key ?? ''} ${refrigerant}`;
    const earlier = lines.get(id) ?? { key, label, refrigerant, ...nothing };
    const isOurs = as !== 'beforeOurCare';
    lines.set(id, {
      ...earlier,
      [as]: earlier[as] + massMicrograms,
      atLeast: earlier.atLeast + (isOurs ? atLeastMicrograms : 0n),
    });
  }
  return [...lines.values()].filter((line) => totalOf(line) !== 0n || line.atLeast !== 0n || line.beforeOurCare !== 0n);
}

export const addUp = (lines: readonly EmissionMasses[]): EmissionMasses =>
  lines.reduce(
    (sum, line) => ({
      measured: sum.measured + line.measured,
      inferred: sum.inferred + line.inferred,
      hose: sum.hose + line.hose,
      atLeast: sum.atLeast + line.atLeast,
      beforeOurCare: sum.beforeOurCare + line.beforeOurCare,
    }),
    nothing,
  );
