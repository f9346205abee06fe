import { useMemo } from 'react';
import { judgeFill } from '../../../shared/cylinder-fill/fill-judgement.ts';
import type { PreviewedBalance } from '../../../shared/entry-previews/entry-preview.schema.ts';
import { placeWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { type BeamMark, type BeamSpec, roundEnd } from '../../ui/beam/beam-spec.ts';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import type { FormContext } from './answers.ts';

/** The beam of every cylinder and unit that the group touches, before and after it. */
export function BalanceBeams({ balances, context }: { balances: readonly PreviewedBalance[]; context: FormContext }) {
  return (
    <div className="flex flex-col gap-4">
      {balances.map((balance) => (
        <BalanceBeam key={`${balance.place.id} ${balance.refrigerant}`} balance={balance} context={context} />
      ))}
    </div>
  );
}

function BalanceBeam({ balance, context }: { balance: PreviewedBalance; context: FormContext }) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const { place, refrigerant, beforeG, afterG, known } = balance;
  const isUnit = place.place === 'unit';
  const fullG = isUnit && context.unit?.id === place.id ? (context.unit?.fullCharge?.massG ?? null) : null;
  const cylinder = isUnit ? undefined : context.cylinder(place.id ?? '');
  const cylinderLimitG = cylinder
    ? judgeFill(cylinder, afterG > 0 ? [refrigerant] : [], context.firmJurisdiction).limitG
    : null;
  const limitG = isUnit ? fullG : cylinderLimitG;
  const words = t('record.beam.of', { place: placeWords(t, place), refrigerant });
  const change = t(known ? 'record.beam.change' : 'record.beam.sum', {
    before: format.mass(beforeG),
    after: format.mass(afterG),
  });
  const spec = useMemo((): BeamSpec | null => {
    if (beforeG < 0 || afterG < 0) return null;
    const { gramsPer } = unit;
    const [low, high] = [Math.min(beforeG, afterG), Math.max(beforeG, afterG)];
    const mark = limitG !== null && (high === 0 || limitG <= high * 8) ? limitG : null;
    const marks: BeamMark[] =
      mark === null
        ? []
        : [
            {
              at: mark / gramsPer,
              label: t(isUnit ? 'record.beam.full' : 'record.beam.limit', { mass: format.mass(mark) }),
              kind: isUnit ? 'target' : 'stop',
            },
          ];
    const parts = [
      {
        from: 0,
        to: low,
        kind: 'rest' as const,
        label: low === beforeG ? t('record.beam.before', { mass: format.mass(low) }) : '',
      },
      {
        from: low,
        to: high,
        kind: 'move' as const,
        label: t(afterG > beforeG ? 'record.beam.in' : 'record.beam.out', { mass: format.mass(high - low) }),
      },
    ];
    return {
      domain: [0, roundEnd((Math.max(high, mark ?? 0, 1) * 1.06) / gramsPer)],
      unit: unit.unit,
      segments: parts
        .filter(({ from, to }) => to > from)
        .map(({ from, to, ...part }) => ({ ...part, from: from / gramsPer, to: to / gramsPer })),
      poise: { at: afterG / gramsPer, label: t('record.beam.after', { mass: format.mass(afterG) }), kind: 'move' },
      marks,
    };
  }, [beforeG, afterG, limitG, isUnit, unit, t, format]);
  return (
    <div>
      <p className="flex flex-wrap justify-between gap-x-4 leading-snug">
        <span className="type-label text-ink-soft">{words}</span>
        <span className="font-[600]">{change}</span>
      </p>
      {spec ? <Beam spec={spec} summary={`${words}: ${change}`} /> : null}
    </div>
  );
}
