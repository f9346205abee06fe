import { useQuery } from '@tanstack/react-query';
import { clauseOfException, EVACUATION_EXCEPTIONS } from '../../../../shared/reference/evacuation-level.ts';
import { toolQueries } from '../../../api/tools.ts';
import { useMessages } from '../../../lib/messages.ts';
import { ChoiceField, SelectField, TextField } from '../../../ui/field.tsx';
import type { Answers } from '../answers.ts';
import { levelAsked } from '../level.ts';
import type { Of } from '../question-props.ts';

/** The level that the law asks for with this machine and unit, with its clause, and the level that was reached. */
export function LevelQuestion({ answers, context, change, error }: Of<'level'>) {
  const t = useMessages();
  const machines = useQuery(toolQueries.choice('recoveryMachine')).data ?? [];
  const required = levelAsked(answers, context);
  if (!required) return null;
  return (
    <div className="flex flex-col">
      {machines.length > 0 ? (
        <SelectField
          layout="row"
          label={t('record.level.machine')}
          placeholder={t('record.level.noMachine')}
          choices={machines.map(({ id, name }) => ({ value: id, label: name }))}
          value={answers.machineId}
          onChange={(event) => change({ machineId: event.target.value })}
        />
      ) : null}
      {context.machineMadeOn === null ? (
        <ChoiceField
          label={t('record.level.made')}
          name="machineAge"
          value={answers.machineAge}
          choices={(['newer', 'older', 'unknown'] as const).map((value) => ({
            value,
            label: t(`record.level.made.${value}`),
          }))}
          onChange={(value) => change({ machineAge: value as Answers['machineAge'] })}
        />
      ) : null}
      <div className="flex items-baseline justify-between gap-4 border-y border-rule py-2.5">
        <p className="leading-snug">
          {t('record.level.required')}
          <span className="type-label block text-[0.9375rem] text-ink-soft">
            {t(`record.level.class.${required.pressureClass}`)}, {required.clause}
          </span>
        </p>
        <strong className="text-[1.25rem] font-[680] whitespace-nowrap">
          {t(`record.level.${required.unit}`, { value: required.value })}
        </strong>
      </div>
      <TextField
        layout="row"
        inputMode="decimal"
        label={t('record.level.reached')}
        hint={t(`record.level.unit.${required.unit}`)}
        value={answers.levelReached}
        error={error('levelReached')}
        onChange={(event) => change({ levelReached: event.target.value })}
      />
      <SelectField
        layout="row"
        label={t('record.level.exception')}
        placeholder={t('record.level.noException')}
        choices={[
          ...EVACUATION_EXCEPTIONS.map((is) => ({
            value: is,
            label: `${t(`record.exception.${is}`)} (${clauseOfException(is)})`,
          })),
          { value: 'other', label: t('record.exception.other') },
        ]}
        value={answers.levelException}
        onChange={(event) => change({ levelException: event.target.value as Answers['levelException'] })}
      />
      {answers.levelException === 'other' ? (
        <TextField
          label={t('record.reason')}
          value={answers.reason}
          maxLength={1000}
          error={error('reason')}
          onChange={(event) => change({ reason: event.target.value })}
        />
      ) : null}
      <p className="pt-2 text-[0.9375rem] text-ink-soft">{t('record.level.governs')}</p>
    </div>
  );
}
