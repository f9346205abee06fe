import { ASSUMED_SCALE } from '../../../../shared/ledger/scale.ts';
import type { Tool } from '../../../../shared/tools/tools.schema.ts';
import { useFormat } from '../../../lib/format.ts';
import { type Translate, useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Button } from '../../../ui/button.tsx';
import { ChoiceField } from '../../../ui/field.tsx';
import { Failed, RowsSkeleton } from '../../../ui/notice.tsx';
import { keepHabits } from '../habits.ts';
import { READING_UNITS, type ReadingUnit, usualUnit } from '../scale-reading.ts';
import { StepPage } from '../step-page.tsx';
import { type StepProps, useStepDraft } from '../use-weigh-in.ts';
import { useWeighInData } from '../weigh-in-data.ts';
import type { Mode } from '../weigh-in-state.ts';

/** Nobody has said otherwise: the scale on one's own van. */
const OWN = 'own';

/** On which scale and how it is read. The last choice of this device stands already. */
export function WeighingStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const { scales, failed, myId } = useWeighInData();
  const leg = weighIn.legs.at(-1);
  const [chosen, setToolId] = useStepDraft<string | null>(weighIn, 'tool', () => leg?.toolId ?? OWN);
  const toolId = chosen === OWN ? (scales?.find(({ heldBy }) => heldBy === myId)?.id ?? null) : chosen;
  const [mode, setMode] = useStepDraft<Mode>(weighIn, 'mode', () => leg?.mode ?? 'gross');
  const { mass } = usePreferences();
  // What was chosen for this scale the last time stands; a scale that is new here shows what it was made to show.
  const [said, setUnit] = useStepDraft<ReadingUnit | null>(weighIn, 'unit', () =>
    leg && (leg.toolId !== null || leg.unit !== 'g') ? leg.unit : null,
  );
  const unit = said ?? usualUnit(scales?.find((scale) => scale.id === toolId)?.scale?.resolutionG ?? null, mass);
  const goOn = () => {
    const known = scales?.some((scale) => scale.id === toolId) ? toolId : null;
    keepHabits({ toolId: known, mode, unit });
    dispatch({ type: 'weighing', toolId: known, mode, unit });
  };
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.weighing.title')}
      next={
        <Button kind="act" wide onClick={goOn} disabled={scales === null && !failed}>
          {t('weighIn.goOn')}
        </Button>
      }
    >
      {failed ? <Failed error={failed.error} onRetry={failed.retry} /> : null}
      {scales === null && !failed ? (
        <RowsSkeleton rows={3} rowClass="h-14" />
      ) : (
        <ScaleChoice
          scales={scales ?? []}
          toolId={toolId}
          onChange={(id) => {
            setToolId(id);
            setUnit(null);
          }}
        />
      )}
      <div className="pt-1">
        <ChoiceField
          label={t('weighIn.mode')}
          name="mode"
          value={mode}
          choices={(['gross', 'zeroed'] as const).map((value) => ({ value, label: t(`weighIn.mode.${value}`) }))}
          onChange={(value) => setMode(value as Mode)}
        />
        <p className="text-[0.9375rem] leading-snug text-ink-soft">{t(`weighIn.mode.${mode}.detail`)}</p>
      </div>
      <ChoiceField
        label={t('weighIn.unitOfScale')}
        name="unit"
        value={unit}
        choices={READING_UNITS.map((value) => ({ value, label: value === 'lbOz' ? 'lb oz' : value }))}
        onChange={(value) => setUnit(value as ReadingUnit)}
      />
    </StepPage>
  );
}

function ScaleChoice({
  scales,
  toolId,
  onChange,
}: {
  scales: readonly Tool[];
  toolId: string | null;
  onChange: (toolId: string | null) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const { myId } = useWeighInData();
  const mineFirst = [...scales].sort((a, b) => Number(b.heldBy === myId) - Number(a.heldBy === myId));
  const known = scales.some((scale) => scale.id === toolId);
  return (
    <fieldset>
      <legend className="type-label mb-1 text-ink-soft">{t('weighIn.scale')}</legend>
      <div className="border-t border-rule">
        {mineFirst.map((scale) => (
          <ScaleRow
            key={scale.id}
            title={scale.name}
            detail={scaleDetail(
              scale,
              t,
              (massG) => format.scaleStep(massG),
              (day) => format.day(day),
            )}
            checked={scale.id === toolId}
            onChange={() => onChange(scale.id)}
          />
        ))}
        <ScaleRow
          title={t('weighIn.scale.none')}
          detail={t('weighIn.scale.none.detail', { steps: format.scaleStep(ASSUMED_SCALE.resolutionG) })}
          checked={!known}
          onChange={() => onChange(null)}
        />
      </div>
    </fieldset>
  );
}

function scaleDetail(scale: Tool, t: Translate, step: (massG: number) => string, day: (day: string) => string) {
  const parts = [
    ...(scale.scale ? [t('weighIn.scale.steps', { steps: step(scale.scale.resolutionG) })] : []),
    scale.lastCheckedOn
      ? t('weighIn.scale.checked', { date: day(scale.lastCheckedOn) })
      : t('weighIn.scale.neverChecked'),
    ...(scale.heldByName ? [t('weighIn.scale.with', { name: scale.heldByName })] : []),
  ];
  return parts.join(', ');
}

function ScaleRow({
  title,
  detail,
  checked,
  onChange,
}: {
  title: string;
  detail: string;
  checked: boolean;
  onChange: () => void;
}) {
  return (
    <label
      className={`relative flex min-h-14 items-center justify-between gap-3.5 border-b border-rule py-1.5 hover:bg-well has-focus-visible:z-1 has-focus-visible:outline-3 has-focus-visible:outline-ink ${checked ? 'pl-3 shadow-[inset_4px_0_0_var(--color-rest)]' : ''}`}
    >
      <span className="leading-tight">
        <span className="font-[600]">{title}</span>
        <span className="type-label block text-[0.9375rem] text-ink-soft">{detail}</span>
      </span>
      {checked ? (
        <svg aria-hidden="true" viewBox="0 0 16 16" className="size-4 shrink-0 fill-none stroke-rest stroke-[2.4]">
          <path d="M2.5 8.5l3.5 3.5 7.5-8" />
        </svg>
      ) : null}
      <input
        type="radio"
        name="scale"
        checked={checked}
        onChange={onChange}
        className="absolute inset-0 cursor-pointer appearance-none opacity-0"
      />
    </label>
  );
}
