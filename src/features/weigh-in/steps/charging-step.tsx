import { useId, useRef, useState } from 'react';
import { deviceNow } from '../../../lib/local-time.ts';
import { type Translate, useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Beam } from '../../../ui/beam/beam.tsx';
import { Button } from '../../../ui/button.tsx';
import { FieldError } from '../../../ui/field.tsx';
import { Cautions } from '../cautions.tsx';
import { chargingBeam } from '../charging-beam.ts';
import { faultOfEnd, type LegFault, type Progress, progressOf, type Stop, stopOf } from '../leg-figures.ts';
import { NumberPad, ReadingWindow } from '../number-pad.tsx';
import { microgramsOf, onScale } from '../scale-reading.ts';
import { StepPage } from '../step-page.tsx';
import type { StepProps } from '../use-weigh-in.ts';
import { useWeighInData } from '../weigh-in-data.ts';
import type { Leg } from '../weigh-in-state.ts';

/** Charging against the scale: what it reads now, how much is still to go, and where to close the cylinder. */
export function ChargingStep({ weighIn, dispatch }: StepProps) {
  const leg = weighIn.legs.at(-1);
  return leg ? <Charging weighIn={weighIn} dispatch={dispatch} leg={leg} /> : null;
}

function Charging({ weighIn, dispatch, leg }: StepProps & { leg: Leg }) {
  const t = useMessages();
  const { locale } = usePreferences();
  const id = useId();
  const { unit, cylinderOf, scaleOf } = useWeighInData();
  const [asked, setAsked] = useState(false);
  const scale = scaleOf(leg.toolId);
  const tareG = cylinderOf(leg.cylinderId)?.tareG ?? null;
  const stop = stopOf(weighIn, scale);
  const progress = useLastProgress(progressOf(leg, stop, tareG));
  const show = (massG: number) => onScale(massG, leg.now.unit, scale.resolutionG, locale);
  // Whether the hose was lost or emptied is asked next; here only what no answer could make right is refused.
  const fault = faultOfEnd(leg, leg.now, leg.hose.full ? 'lost' : 'emptied', tareG);
  const end = (change: boolean) => {
    setAsked(true);
    if (fault === null) dispatch({ type: 'end', at: deviceNow().toISOString(), change });
  };
  const { spec, summary } = beamOf(leg, stop, progress, { show, t });
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      next={
        <Button kind="act" wide onClick={() => end(false)}>
          {t('weighIn.charging.end')}
        </Button>
      }
      pad={
        <>
          <NumberPad
            reading={leg.now}
            onChange={(reading) => {
              setAsked(false);
              dispatch({ type: 'keyNow', reading });
            }}
            beside={[
              { label: t('weighIn.charging.change'), onPress: () => end(true) },
              {
                label: t('weighIn.charging.leaveOpen'),
                onPress: () => dispatch({ type: 'leaveOpen' }),
                disabled: leg.mode === 'zeroed',
              },
            ]}
          />
          {leg.mode === 'zeroed' ? (
            <p className="text-[0.9375rem] text-ink-soft">{t('weighIn.charging.zeroedNotOpen')}</p>
          ) : null}
          {/* Under the keys: on a phone they must be within reach while it charges. */}
          {weighIn.purpose === 'adjust' ? <AdjustHelp /> : null}
        </>
      }
    >
      <div>
        <ReadingWindow
          label={t(leg.mode === 'zeroed' ? 'weighIn.windowNowZeroed' : 'weighIn.windowNow')}
          reading={leg.now}
          onChange={(reading) => {
            setAsked(false);
            dispatch({ type: 'keyNow', reading });
          }}
          below={leg.mode === 'zeroed'}
          invalid={asked && fault !== null}
          describedBy={id}
        />
        <div id={id} aria-live="polite" className="min-h-9 pt-1.5">
          {asked && fault !== null ? (
            <FieldError>{faultText(fault, leg, tareG, show, t)}</FieldError>
          ) : (
            <HowFar progress={progress} stop={stop} show={show} />
          )}
        </div>
      </div>
      <Beam spec={spec} summary={summary} />
      {progress?.state === 'past' ? (
        <WhatToDo mass={show(-(progress.toGoG ?? 0))} />
      ) : (
        <Cautions refrigerant={unit.refrigerant} at="charging" />
      )}
    </StepPage>
  );
}

/** While the next number is half keyed in, the last whole one stays on the beam. */
function useLastProgress(progress: Progress | null): Progress | null {
  const last = useRef<Progress | null>(null);
  if (progress) last.current = progress;
  return progress ?? last.current;
}

function HowFar({
  progress,
  stop,
  show,
}: {
  progress: Progress | null;
  stop: Stop | null;
  show: (massG: number) => string;
}) {
  const t = useMessages();
  const look = 'text-[1.25rem] leading-tight font-[640] text-move';
  if (!stop || stop.scaleG === null) {
    return <p className={look}>{t('weighIn.charging.gone', { mass: show(progress?.droppedG ?? 0) })}</p>;
  }
  const at = show(stop.scaleG);
  const toGoG = progress?.toGoG ?? stop.dropG;
  if (progress?.state === 'past') {
    return (
      <p role="alert" className={look}>
        {t('weighIn.charging.past', { mass: show(-toGoG), stop: at })}
      </p>
    );
  }
  if (progress?.state === 'reached') return <p className={look}>{t('weighIn.charging.reached', { stop: at })}</p>;
  return <p className={look}>{t('weighIn.charging.toGo', { mass: show(toGoG), stop: at })}</p>;
}

/** Past the stop: what goes too far is closed, read, posted as it is, and then taken back. */
function WhatToDo({ mass }: { mass: string }) {
  const t = useMessages();
  return (
    <ol className="list-decimal border-l-4 border-ink py-1 pl-8 text-[1rem] leading-snug">
      <li>{t('weighIn.overshoot.close')}</li>
      <li>{t('weighIn.overshoot.read')}</li>
      <li>{t('weighIn.overshoot.recover', { mass })}</li>
    </ol>
  );
}

function AdjustHelp() {
  const t = useMessages();
  return (
    <ul className="list-disc border-t border-rule pt-3 pl-5 text-[0.9375rem] leading-snug text-ink-soft">
      <li>{t('weighIn.adjust.byManual')}</li>
      <li>{t('weighIn.adjust.inverter')}</li>
      <li>{t('weighIn.adjust.blend')}</li>
    </ul>
  );
}

export function faultText(
  fault: LegFault,
  leg: Pick<Leg, 'now' | 'start' | 'mode'>,
  tareG: number | null,
  show: (massG: number) => string,
  t: Translate,
): string {
  const grams = (micrograms: bigint | null) => Number(micrograms ?? 0n) / 1e6;
  return t(`weighIn.fault.${fault}`, {
    given: show(grams(microgramsOf(leg.now))),
    start: show(leg.mode === 'zeroed' ? 0 : grams(microgramsOf(leg.start))),
    tare: show(tareG ?? 0),
  });
}

function beamOf(
  leg: Leg,
  stop: Stop | null,
  progress: Progress | null,
  { show, t }: { show: (massG: number) => string; t: Translate },
) {
  const startG = leg.mode === 'zeroed' ? 0 : Number(microgramsOf(leg.start) ?? 0n) / 1e6;
  const droppedG = progress?.droppedG ?? 0;
  const labels = {
    start: t('weighIn.beam.start', { mass: show(startG) }),
    now: t('weighIn.beam.now', { mass: show(droppedG) }),
    stop:
      stop?.scaleG == null
        ? ''
        : t('weighIn.beam.stop', {
            mass: show(stop.scaleG),
            tolerance: show(stop.toleranceG),
          }),
  };
  const spec = chargingBeam({ startG, droppedG, stop, labels, unit: leg.now.unit });
  return { spec, summary: `${[labels.start, labels.now, labels.stop].filter(Boolean).join(', ')}.` };
}
