import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Disclosure } from '../../ui/disclosure.tsx';
import { ChoiceField, SelectField } from '../../ui/field.tsx';
import { readQuantity } from '../../ui/quantity-draft.ts';
import { BOUNDS } from './bounds.ts';
import { type ChargeDraft, emptyPipe, fieldUnits } from './charge-draft.ts';
import { useChargeForm, useOpen } from './charge-form.ts';
import { Co2 } from './co2.tsx';
import { CountField } from './count-field.tsx';
import { GWP_SET_CHOICES } from './fixed-choices.ts';
import { onScale } from './on-scale.ts';
import { usePipeChoices } from './pipe-choices.ts';
import { PipeList } from './pipe-list.tsx';
import { QuantityField } from './quantity-field.tsx';

/** New install, change of the line set, or everything into an evacuated circuit. */
export function JobSection() {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, set, addRow } = useChargeForm();
  const [open, setOpen] = useOpen(false);
  return (
    <Disclosure
      title={t('chargeScreen.job')}
      summary={t(`chargeScreen.job.${draft.job}`)}
      open={open}
      onToggle={setOpen}
    >
      <ChoiceField
        label={t('chargeScreen.job.question')}
        name="job"
        value={draft.job}
        choices={(['newInstall', 'lineSetChange', 'fullRecharge'] as const).map((value) => ({
          value,
          label: t(`chargeScreen.job.${value}`),
        }))}
        onChange={(value) => {
          set('job', value as ChargeDraft['job']);
          if (value === 'lineSetChange' && draft.previousPipes.length === 0) {
            addRow('previousPipes', {
              ...emptyPipe('A', fieldUnits(preferences)),
              liquidOd: draft.pipes[0]?.liquidOd ?? '',
            });
          }
        }}
      />
      <p className="type-label mt-1 text-ink-soft">{t(`chargeScreen.job.${draft.job}.means`)}</p>
      {draft.job === 'lineSetChange' ? (
        <PipeList list="previousPipes" at="/previousLineSet" title={t('chargeScreen.previousPipes')} />
      ) : null}
    </Disclosure>
  );
}

/** What counts for the limits and the record, not for the charge. */
export function PipeDetailSection() {
  const t = useMessages();
  const { draft, setRow, errorAt } = useChargeForm();
  const choices = usePipeChoices();
  const wrong = draft.pipes.some((_, index) => errorAt(`/lineSet/branches/${index}/riseM`) !== undefined);
  const [open, setOpen] = useOpen(wrong);
  const given = draft.pipes.filter((pipe) => pipe.rise.text !== '' || pipe.bends !== '').length;
  return (
    <Disclosure
      title={t('chargeScreen.pipeDetail')}
      summary={given > 0 ? t('chargeScreen.given') : t('chargeScreen.notGiven')}
      open={open}
      onToggle={setOpen}
    >
      {draft.pipes.map((pipe, index) => {
        const at = `/lineSet/branches/${index}`;
        return (
          <div key={pipe.key} className={index > 0 ? 'mt-2 border-t border-rule pt-2' : ''}>
            {draft.pipes.length > 1 ? <p className="font-[600]">{pipe.name}</p> : null}
            <QuantityField
              kind="length"
              big={false}
              allowNegative
              max={BOUNDS.riseM}
              label={t('chargeScreen.rise')}
              hint={t('chargeScreen.riseHint')}
              pointer={`${at}/riseM`}
              draft={pipe.rise}
              onChange={(rise) => setRow('pipes', pipe.key, { rise })}
            />
            <CountField
              label={t('chargeScreen.bends')}
              pointer={`${at}/bends`}
              value={pipe.bends}
              max={BOUNDS.count}
              onChange={(bends) => setRow('pipes', pipe.key, { bends })}
            />
            <QuantityField
              kind="length"
              big={false}
              max={BOUNDS.equivalentMPerBend}
              label={t('chargeScreen.equivalent')}
              hint={t('chargeScreen.equivalentHint')}
              pointer={`${at}/equivalentMPerBend`}
              draft={pipe.equivalent}
              onChange={(equivalent) => setRow('pipes', pipe.key, { equivalent })}
            />
            <SelectField
              layout="row"
              label={t('chargeScreen.gasPipe')}
              placeholder={t('chargeScreen.notGiven')}
              groups={choices}
              value={pipe.gasOd}
              onChange={(event) => setRow('pipes', pipe.key, { gasOd: event.target.value })}
            />
          </div>
        );
      })}
    </Disclosure>
  );
}

const LIMITS = [
  ['minLength', '/basis/limits/minLengthM'],
  ['maxLength', '/basis/limits/maxLengthM'],
  ['maxBranch', '/basis/limits/maxBranchM'],
  ['maxRise', '/basis/limits/maxRiseM'],
  ['maxDrop', '/basis/limits/maxDropM'],
] as const;

/** The manual's limits: beyond them it gives no charge, and neither do we. */
export function LimitsSection() {
  const t = useMessages();
  const format = useFormat();
  const { locale } = usePreferences();
  const { draft, set, errorAt } = useChargeForm();
  const [open, setOpen] = useOpen(errorAt('/basis/limits/maxTotalChargeG') !== undefined);
  const most = readQuantity('length', draft.maxLength, { locale });
  const anyGiven = LIMITS.some(([name]) => draft[name].text !== '') || draft.maxTotal.text !== '';
  const summary =
    most.is === 'read'
      ? t('chargeScreen.limits.upTo', { length: format.length(most.base) })
      : t(anyGiven ? 'chargeScreen.given' : 'chargeScreen.notGiven');
  return (
    <Disclosure title={t('chargeScreen.limits')} summary={summary} open={open} onToggle={setOpen}>
      {LIMITS.map(([name, pointer]) =>
        // Between indoor units there is a height only where there are several.
        (name === 'maxDrop' || name === 'maxBranch') && draft.pipes.length < 2 ? null : (
          <QuantityField
            key={name}
            kind="length"
            big={false}
            label={t(`chargeScreen.limits.${name}`)}
            pointer={pointer}
            draft={draft[name]}
            onChange={(value) => set(name, value)}
          />
        ),
      )}
      <QuantityField
        kind="mass"
        big={false}
        label={t('chargeScreen.limits.maxTotal')}
        pointer="/basis/limits/maxTotalChargeG"
        draft={draft.maxTotal}
        onChange={(value) => set('maxTotal', value)}
      />
    </Disclosure>
  );
}

/** The cylinder as it stands on the scale, so that the screen can say where to close it. */
export function ScaleSection({ children }: { children?: React.ReactNode }) {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, set } = useChargeForm();
  const [open, setOpen] = useOpen(false);
  const gross = readQuantity('mass', draft.cylinderGross, preferences);
  return (
    <Disclosure
      title={t('chargeScreen.scale')}
      summary={
        gross.is === 'read' ? onScale(draft.cylinderGross, gross, gross.base, preferences) : t('chargeScreen.notGiven')
      }
      open={open}
      onToggle={setOpen}
    >
      {children}
      <QuantityField
        kind="mass"
        big={false}
        label={t('chargeScreen.gross')}
        hint={t('chargeScreen.grossHint')}
        pointer="/scale/gross"
        draft={draft.cylinderGross}
        onChange={(value) => set('cylinderGross', value)}
      />
    </Disclosure>
  );
}

export function Co2Section() {
  const t = useMessages();
  const { draft, set } = useChargeForm();
  const [open, setOpen] = useOpen(false);
  return (
    <Disclosure
      title={
        <>
          <Co2 /> {t('chargeScreen.co2')}
        </>
      }
      summary={draft.gwpSet}
      open={open}
      onToggle={setOpen}
    >
      <SelectField
        label={t('chargeScreen.gwpSet')}
        choices={GWP_SET_CHOICES.map((value) => ({ value, label: t(`chargeScreen.gwpSet.${value}`) }))}
        value={draft.gwpSet}
        onChange={(event) => set('gwpSet', event.target.value as ChargeDraft['gwpSet'])}
      />
    </Disclosure>
  );
}
