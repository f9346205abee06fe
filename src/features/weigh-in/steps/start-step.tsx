import { useId, useState } from 'react';
import { useFormat } from '../../../lib/format.ts';
import { deviceNow } from '../../../lib/local-time.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Button } from '../../../ui/button.tsx';
import { FieldError } from '../../../ui/field.tsx';
import { Notice } from '../../../ui/notice.tsx';
import { Cautions } from '../cautions.tsx';
import { gapAtStartG, hoseMicrograms } from '../leg-figures.ts';
import { NumberPad, ReadingWindow } from '../number-pad.tsx';
import { microgramsOf, onScale } from '../scale-reading.ts';
import { StepPage } from '../step-page.tsx';
import type { StepProps } from '../use-weigh-in.ts';
import { useWeighInData } from '../weigh-in-data.ts';
import type { Leg } from '../weigh-in-state.ts';

/** The start reading; of a zeroed scale that it stands at nothing. */
export function StartStep({ weighIn, dispatch }: StepProps) {
  const leg = weighIn.legs.at(-1);
  if (!leg) return null;
  return leg.mode === 'zeroed' ? (
    <ZeroedStart weighIn={weighIn} dispatch={dispatch} />
  ) : (
    <GrossStart weighIn={weighIn} dispatch={dispatch} leg={leg} />
  );
}

function ZeroedStart({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const { unit } = useWeighInData();
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.start.zeroed')}
      lead={t('weighIn.start.zeroed.lead')}
      next={
        <Button kind="act" wide onClick={() => dispatch({ type: 'start', at: deviceNow().toISOString() })}>
          {t('weighIn.start.zeroed.act')}
        </Button>
      }
    >
      <Cautions refrigerant={unit.refrigerant} at="start" />
    </StepPage>
  );
}

function GrossStart({ weighIn, dispatch, leg }: StepProps & { leg: Leg }) {
  const t = useMessages();
  const format = useFormat();
  const { locale } = usePreferences();
  const id = useId();
  const { unit, cylinderOf, scaleOf } = useWeighInData();
  const [asked, setAsked] = useState(false);
  const cylinder = cylinderOf(leg.cylinderId);
  const scale = scaleOf(leg.toolId);
  const read = microgramsOf(leg.start);
  const belowTare = read !== null && cylinder !== null && Number(read) / 1e6 < cylinder.tareG * 0.98;
  const error =
    read === null
      ? t('weighIn.start.needed')
      : belowTare
        ? t('weighIn.fault.belowTare', {
            given: onScale(Number(read) / 1e6, leg.start.unit, scale.resolutionG, locale),
            tare: onScale(cylinder?.tareG ?? 0, leg.start.unit, scale.resolutionG, locale),
          })
        : null;
  const gapG = cylinder && !belowTare ? gapAtStartG(leg, cylinder, scale) : null;
  const bookG = cylinder
    ? cylinder.tareG + cylinder.contentG - (leg.hose.full ? Number(hoseMicrograms(leg)) / 1e6 : 0)
    : null;
  const known = cylinder !== null && (cylinder.contentG > 0 || cylinder.lastWeighedAt !== null);
  const goOn = () => {
    setAsked(true);
    if (error === null) dispatch({ type: 'start', at: deviceNow().toISOString() });
  };
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.start.title')}
      lead={t(
        leg.hose.content === null
          ? 'weighIn.start.lead'
          : leg.hose.full
            ? 'weighIn.start.leadFull'
            : 'weighIn.start.leadNotFull',
      )}
      next={
        <Button kind="act" wide onClick={goOn}>
          {t('weighIn.start.act')}
        </Button>
      }
      pad={
        <>
          <NumberPad reading={leg.start} onChange={(reading) => dispatch({ type: 'keyStart', reading })} />
          <Cautions refrigerant={unit.refrigerant} at="start" />
        </>
      }
    >
      <ReadingWindow
        label={t('weighIn.window')}
        reading={leg.start}
        onChange={(reading) => dispatch({ type: 'keyStart', reading })}
        invalid={asked && error !== null}
        describedBy={id}
      />
      <div id={id} className="-mt-1 min-h-12" aria-live="polite">
        {asked && error !== null ? (
          <FieldError>{error}</FieldError>
        ) : gapG !== null && known && read !== null ? (
          <Notice
            title={t(gapG < 0 ? 'weighIn.start.less' : 'weighIn.start.more', { mass: format.mass(Math.abs(gapG)) })}
          >
            {t('weighIn.start.gap')}
          </Notice>
        ) : known && bookG !== null ? (
          <p className="type-label text-ink-soft">
            {t('weighIn.start.byBook', { mass: onScale(bookG, leg.start.unit, scale.resolutionG, locale) })}
          </p>
        ) : (
          <p className="type-label text-ink-soft">{t('weighIn.start.neverWeighed')}</p>
        )}
      </div>
    </StepPage>
  );
}
