import { forwardRef } from 'react';
import type { RoomLimitResponse } from '../../../shared/room-limit/room-limit.schema.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import type { BeamSpec } from '../../ui/beam/beam-spec.ts';
import { type BeamUnit, chargeBeam } from '../../ui/beam/presets.ts';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { Figure } from '../../ui/figure.tsx';
import { readQuantity } from '../../ui/quantity-draft.ts';
import type { ChargeDraft } from './charge-draft.ts';
import { Co2 } from './co2.tsx';
import { labelOfField } from './field-labels.ts';
import { inOwnUnits } from './in-own-units.ts';
import { onScale } from './on-scale.ts';
import { type ChargeAnswer, sayRefusal } from './use-charge.ts';

interface Props {
  draft: ChargeDraft;
  answer: ChargeAnswer;
  room: RoomLimitResponse | null;
  onExample?: (() => void) | undefined;
}

/** The one number of this screen, what to do with it, and the beam under it. */
export const Answer = forwardRef<HTMLDivElement, Props>(function Answer({ draft, answer, room, onExample }, ref) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const spec = beamOf(answer, room, { t, format, unit });
  const total = answer.is === 'done' ? format.massTotalPieces(answer.result.totalG) : null;
  return (
    <div ref={ref} className="pt-3 pb-1 desk:pt-2">
      <p className="type-label text-ink-soft">
        {draft.refrigerant === ''
          ? t('chargeScreen.total')
          : t('chargeScreen.totalOf', { refrigerant: draft.refrigerant })}
      </p>
      <output className="type-figure block min-h-[1em] text-[clamp(2.75rem,16vw,4.25rem)] wide:text-[5.25rem]">
        {total ? (
          <Figure pieces={total} />
        ) : (
          <span aria-hidden="true" className="text-edge">
            –
          </span>
        )}
      </output>
      <div className="min-h-[3.25rem] pt-1.5" aria-live="polite">
        {answer.is === 'done' ? <WhatToDo draft={draft} result={answer.result} /> : <WhyNot answer={answer} />}
        {answer.is === 'incomplete' && onExample ? (
          <button
            type="button"
            onClick={onExample}
            className="type-label inline-flex min-h-12 items-center text-rest underline underline-offset-[3px]"
          >
            {t('chargeScreen.example')}
          </button>
        ) : null}
      </div>
      <Beam spec={spec.beam} summary={spec.summary} className="pt-1" />
    </div>
  );
});

function WhatToDo({ draft, result }: { draft: ChargeDraft; result: Extract<ChargeAnswer, { is: 'done' }>['result'] }) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const gross = readQuantity('mass', draft.cylinderGross, preferences);
  const co2 =
    result.co2eT === null ? null : (
      <p className="type-label text-ink-soft">
        {format.tonnes(result.co2eT)} <Co2 />{' '}
        {t('chargeScreen.co2By', { gwpSet: t(`chargeScreen.gwpSet.${result.gwpSet}`) })}
      </p>
    );
  if (result.recoverG > 0) {
    return (
      <>
        <p className="text-[1.1875rem] leading-tight font-[620] text-move">
          {t('chargeScreen.recover', { mass: format.mass(result.recoverG) })}
        </p>
        {co2}
      </>
    );
  }
  if (result.weighInG === 0) {
    return (
      <>
        <p className="text-[1.1875rem] leading-tight font-[620] text-rest">{t('chargeScreen.nothing')}</p>
        {co2}
      </>
    );
  }
  const enough = gross.is === 'read' && gross.base > result.weighInG;
  return (
    <>
      <p className="text-[1.1875rem] leading-tight font-[620] text-move">
        {gross.is === 'read' && enough
          ? t('chargeScreen.weighInTo', {
              mass: format.mass(result.weighInG),
              stop: onScale(draft.cylinderGross, gross, gross.base - result.weighInG, preferences),
            })
          : t('chargeScreen.weighIn', { mass: format.mass(result.weighInG) })}
      </p>
      {gross.is === 'read' && !enough ? (
        <p className="font-[600]">
          {t('chargeScreen.notEnough', { mass: onScale(draft.cylinderGross, gross, gross.base, preferences) })}
        </p>
      ) : null}
      {co2}
    </>
  );
}

/** Why there is no figure: what is still needed, each leading to its field, or what the rules refuse. */
function WhyNot({ answer }: { answer: Exclude<ChargeAnswer, { is: 'done' }> }) {
  const t = useMessages();
  const preferences = usePreferences();
  if (answer.is === 'waiting') {
    return <p>{t(answer.failed ? 'chargeScreen.formulaFailed' : 'chargeScreen.formulaWaiting')}</p>;
  }
  if (answer.is === 'refused') {
    const messages = [...new Set(answer.refusals.map((refusal) => inOwnUnits(sayRefusal(refusal, t), preferences)))];
    return (
      <div className="border-l-4 border-ink pl-3">
        <p className="font-[650]">{t('chargeScreen.noFigure')}</p>
        {messages.map((message) => (
          <p key={message} className="text-[0.9375rem] leading-snug">
            {message}
          </p>
        ))}
      </div>
    );
  }
  const pointers = [...answer.missing, ...answer.unreadable];
  const [first] = pointers;
  const names = [...new Set(pointers.map((pointer) => labelOfField(pointer, t)))].join(', ');
  return (
    <button
      type="button"
      className="type-label min-h-12 text-left leading-snug text-ink-soft"
      onClick={() => first && focusField(first)}
    >
      {t(answer.missing.length > 0 ? 'chargeScreen.stillNeeded' : 'chargeScreen.unreadable')}{' '}
      <span className="text-ink underline decoration-edge decoration-1 underline-offset-[3px]">{names}</span>
    </button>
  );
}

function focusField(pointer: string): void {
  const field = document.getElementsByName(pointer)[0];
  for (let up = field?.closest('details'); up; up = up.parentElement?.closest('details')) up.open = true;
  // The browser brings what it focuses into view; `scroll-padding` keeps it clear of the bars.
  field?.focus();
}

function beamOf(
  answer: ChargeAnswer,
  room: RoomLimitResponse | null,
  { t, format, unit }: { t: Translate; format: Formats; unit: BeamUnit },
): { beam: BeamSpec; summary: string } {
  if (answer.is !== 'done') {
    return {
      beam: { domain: [0, 2000 / (unit.gramsPer > 1 ? 1000 : 1)], unit: unit.unit, segments: [] },
      summary: t('chargeScreen.beam.empty'),
    };
  }
  const { result, request, noRoomCheckUpToG } = answer;
  const factoryG = request.basis.factoryChargeG;
  // For a line-set change the beam shows the circuit as it will be: factory charge and the new line set's extra.
  const extraG = result.totalG - factoryG;
  const said = (key: string, massG: number) => ({ massG, label: t(key, { mass: format.mass(massG) }) });
  const maxTotalG = request.basis.limits?.maxTotalChargeG ?? null;
  const roomStop = room && room.limitG !== null && room.verdict !== 'noCheckNeeded' ? Math.floor(room.limitG) : null;
  const total = {
    massG: result.totalG,
    label: t('chargeScreen.beam.total', { mass: format.massTotal(result.totalG) }),
  };
  const stops = [
    ...(roomStop === null ? [] : [said('chargeScreen.beam.room', roomStop)]),
    ...(maxTotalG === null ? [] : [said('chargeScreen.beam.maxTotal', maxTotalG)]),
  ];
  const noCheckUpTo =
    noRoomCheckUpToG === null || roomStop === Math.floor(noRoomCheckUpToG)
      ? null
      : said('chargeScreen.beam.noCheck', Math.floor(noRoomCheckUpToG));
  const factory = said('chargeScreen.beam.factory', factoryG);
  const extra = {
    massG: extraG,
    label: t(extraG < 0 ? 'chargeScreen.beam.less' : 'chargeScreen.beam.extra', {
      mass: format.mass(Math.abs(extraG)),
    }),
  };
  const beam = chargeBeam({ factory, extra, total, noCheckUpTo, stops }, unit);
  const parts = [factory, ...(extraG === 0 ? [] : [extra]), total, ...stops, ...(noCheckUpTo ? [noCheckUpTo] : [])];
  return { beam, summary: `${parts.map((part) => part.label).join(', ')}.` };
}
