import { useCallback, useRef } from 'react';
import type { QuantityKind, UnitOf } from '../../../shared/units/quantities.ts';
import type { QuantityDraft } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { BOUNDS } from './bounds.ts';
import { useChargeForm } from './charge-form.ts';
import type { Pointer } from './draft-to-request.ts';

/** Units that a manual, a scale or a tape of this trade shows. */
const UNITS: { [K in 'mass' | 'length' | 'massPerLength' | 'area']: readonly UnitOf<K>[] } = {
  mass: ['g', 'kg', 'oz', 'lb'],
  length: ['m', 'ft'],
  massPerLength: ['g/m', 'oz/ft'],
  area: ['m2', 'ft2'],
};

const MOST = { mass: BOUNDS.massG, length: BOUNDS.lengthM, massPerLength: BOUNDS.gPerM, area: BOUNDS.areaM2 };

interface Props<Kind extends keyof typeof UNITS & QuantityKind> {
  kind: Kind;
  label: string;
  /** Its place in the request: refusals find it by that, and "still needed" leads to it. */
  pointer: Pointer;
  draft: QuantityDraft<Kind>;
  onChange: (draft: QuantityDraft<Kind>) => void;
  min?: number;
  max?: number;
  allowNegative?: boolean;
  hint?: string;
  example?: string;
  big?: boolean;
}

/** A quantity of the charge form, with the refusal of the engine that is about it. */
export function QuantityField<Kind extends keyof typeof UNITS & QuantityKind>({ pointer, ...props }: Props<Kind>) {
  const { errorAt } = useChargeForm();
  const max = props.max ?? MOST[props.kind];
  const latest = useRef(props.onChange);
  latest.current = props.onChange;
  const onChange = useCallback((value: QuantityDraft<Kind>) => latest.current(value), []);
  return (
    <QuantityInput
      units={UNITS[props.kind] as readonly UnitOf<Kind>[]}
      name={pointer}
      {...props}
      min={props.min ?? (props.allowNegative ? -max : 0)}
      max={max}
      error={errorAt(pointer)}
      onChange={onChange}
    />
  );
}
