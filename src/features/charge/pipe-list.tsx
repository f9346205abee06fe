import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError, SelectField, TextField } from '../../ui/field.tsx';
import { emptyPipe, fieldUnits, nextPipeName, type PipeDraft } from './charge-draft.ts';
import { useChargeForm } from './charge-form.ts';
import { ListRow } from './list-row.tsx';
import { type PipeChoices, usePipeChoices } from './pipe-choices.ts';
import { QuantityField } from './quantity-field.tsx';

/** The pipes of a line set, each with the one that it comes off. */
export function PipeList({
  list,
  at,
  title,
}: {
  list: 'pipes' | 'previousPipes';
  at: '/lineSet' | '/previousLineSet';
  title: string;
}) {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, addRow, errorAt } = useChargeForm();
  const choices = usePipeChoices();
  const pipes = draft[list];
  const error = errorAt(`${at}/branches`) ?? errorAt(at);
  return (
    <fieldset className="my-2 border-y border-rule pt-2 pb-1">
      <legend className="float-left w-full font-[600]">{title}</legend>
      <ul className="clear-left">
        {pipes.map((pipe, index) => (
          <PipeRow
            key={pipe.key}
            list={list}
            pipe={pipe}
            at={`${at}/branches/${index}`}
            others={pipes.filter((other) => other !== pipe)}
            choices={choices}
            removable={pipes.length > 1 || list === 'previousPipes'}
          />
        ))}
      </ul>
      {error ? <FieldError>{error}</FieldError> : null}
      <Button
        kind="quiet"
        name={at}
        onClick={() => {
          const next = emptyPipe(nextPipeName(pipes), fieldUnits(preferences));
          addRow(list, { ...next, liquidOd: pipes.at(-1)?.liquidOd ?? '' });
        }}
      >
        {t('chargeScreen.addPipe')}
      </Button>
    </fieldset>
  );
}

function PipeRow({
  list,
  pipe,
  at,
  others,
  choices,
  removable,
}: {
  list: 'pipes' | 'previousPipes';
  pipe: PipeDraft;
  at: string;
  others: readonly PipeDraft[];
  choices: PipeChoices;
  removable: boolean;
}) {
  const t = useMessages();
  const { setRow, removeRow, errorAt } = useChargeForm();
  const named = others.filter((other) => other.name.trim() !== '');
  const remove = () => {
    removeRow(list, pipe.key);
    for (const other of others) if (other.parent === pipe.name.trim()) setRow(list, other.key, { parent: '' });
  };
  return (
    <ListRow
      title={t('chargeScreen.pipeNamed', { name: pipe.name })}
      what={t('chargeScreen.pipeNamed', { name: pipe.name })}
      onRemove={removable ? remove : undefined}
    >
      <TextField
        layout="row"
        label={t('chargeScreen.pipeName')}
        name={`${at}/name`}
        value={pipe.name}
        autoComplete="off"
        error={errorAt(`${at}/name`)}
        onChange={(event) => setRow(list, pipe.key, { name: event.target.value })}
      />
      {named.length > 0 ? (
        <SelectField
          layout="row"
          label={t('chargeScreen.comesOff')}
          name={`${at}/parent`}
          placeholder={t('chargeScreen.outdoorUnit')}
          choices={named.map((other) => ({ value: other.name.trim(), label: other.name.trim() }))}
          value={pipe.parent}
          error={errorAt(`${at}/parent`)}
          onChange={(event) => setRow(list, pipe.key, { parent: event.target.value })}
        />
      ) : null}
      <SelectField
        layout="row"
        label={t('chargeScreen.liquidPipe')}
        name={`${at}/liquidOdMm`}
        placeholder={t('chargeScreen.choose')}
        groups={choices}
        value={pipe.liquidOd}
        error={errorAt(`${at}/liquidOdMm`)}
        onChange={(event) => setRow(list, pipe.key, { liquidOd: event.target.value })}
      />
      <QuantityField
        kind="length"
        big={false}
        label={t('chargeScreen.run')}
        pointer={`${at}/lengthM`}
        draft={pipe.length}
        onChange={(length) => setRow(list, pipe.key, { length })}
      />
    </ListRow>
  );
}
