import { useFieldArray, useFormContext, useWatch } from 'react-hook-form';
import { type LoaderFunctionArgs, useLoaderData, useNavigate } from 'react-router-dom';
import { addLineSetRequest } from '../../../shared/unit-register/unit.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries, useAddLineSet } from '../../api/units.ts';
import { deviceNow, instantOfLocal, toLocalInput } from '../../lib/local-time.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { FormCheck, FormQuantity, FormSelect, FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { FormPart } from './form-part.tsx';
import {
  type BranchValues,
  branchesOf,
  emptyBranch,
  type LineSetValues,
  lineSetPlaces,
  lineSetRequest,
  nextBranchName,
} from './line-set-values.ts';
import { pipeSizeChoices } from './pipe-sizes.ts';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'server')]);
  const unitId = String(params.unitId);
  const [unit, lineSets] = await Promise.all([
    queryClient.ensureQueryData(unitQueries.one(unitId)),
    queryClient.ensureQueryData(unitQueries.lineSets(unitId)),
  ]);
  return { unit, lineSet: lineSets.items[0] ?? null };
}

/** The pipe as it was really installed, branch by branch. A change is a new dated line set; earlier ones stay. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const preferences = usePreferences();
  const { unit, lineSet } = useLoaderData<typeof loader>();
  const add = useAddLineSet(unit.id);
  const { form, submit, forget } = useRequestForm<LineSetValues>({
    draftKey: `unit.line-set.${unit.id}.${lineSet?.id ?? ''}`,
    initial: () => ({
      id: newId(),
      validFrom: toLocalInput(deviceNow()),
      branches: branchesOf(lineSet, preferences),
      note: '',
    }),
    toRequest: (values) =>
      lineSetRequest(values, {
        locale: preferences.locale,
        instantOf: instantOfLocal,
        notWhole: (typed) => t('units.form.notWhole', { typed }),
      }) as never,
    check: (request) => schemaErrors(addLineSetRequest, request),
    places: (values) => lineSetPlaces(values) as [string, 'note'][],
  });
  const send = submit(async (request) => {
    await add.mutateAsync(request);
    forget();
    await navigate(`/units/${unit.id}`, { replace: true });
  }, answerErrors);
  return (
    <Page
      title={t('units.lineSet.title', { tag: unit.tag })}
      lead={t('units.lineSet.lead')}
      next={
        <Button kind="act" wide type="submit" form="line-set" busy={form.formState.isSubmitting}>
          {t('units.lineSet.act')}
        </Button>
      }
    >
      <div className="page-gutter max-w-2xl pt-4">
        <RequestForm id="line-set" form={form} onSubmit={(event) => void send(event)}>
          <Branches />
          <FormPart title={t('units.form.more')}>
            <FormText layout="stack" type="datetime-local" name="validFrom" label={t('units.lineSet.installed')} />
            <FormText name="note" label={t('units.note')} hint={t('units.form.optional')} maxLength={500} />
          </FormPart>
        </RequestForm>
      </div>
    </Page>
  );
}

function Branches() {
  const t = useMessages();
  const preferences = usePreferences();
  const { control } = useFormContext<LineSetValues>();
  const branches = useFieldArray({ control, name: 'branches' });
  const values = useWatch({ control, name: 'branches' });
  return (
    <>
      {branches.fields.map((row, index) => (
        <FormPart key={row.id} title={t('units.lineSet.branch', { name: values[index]?.name || String(index + 1) })}>
          <BranchFields index={index} branches={values} />
          {branches.fields.length > 1 ? (
            <Button kind="quiet" className="self-start" onClick={() => branches.remove(index)}>
              {t('units.lineSet.remove', { name: values[index]?.name || String(index + 1) })}
            </Button>
          ) : null}
        </FormPart>
      ))}
      <Button
        className="mb-6 self-start"
        onClick={() => branches.append(emptyBranch(nextBranchName(values), preferences))}
      >
        {t('units.lineSet.add')}
      </Button>
    </>
  );
}

function BranchFields({ index, branches }: { index: number; branches: readonly BranchValues[] }) {
  const t = useMessages();
  const preferences = usePreferences();
  const sizes = pipeSizeChoices(preferences);
  const at = `branches.${index}`;
  const parents = branches.flatMap(({ name }, other) =>
    other !== index && name.trim() !== '' ? [{ value: name.trim(), label: name.trim() }] : [],
  );
  const reused = branches[index]?.reused === true;
  return (
    <>
      {branches.length > 1 ? (
        <>
          <FormText name={`${at}.name`} label={t('units.lineSet.name')} maxLength={40} autoComplete="off" />
          <FormSelect
            name={`${at}.parent`}
            label={t('units.lineSet.parent')}
            placeholder={t('units.lineSet.fromOutdoor')}
            choices={parents}
          />
        </>
      ) : null}
      <FormSelect
        name={`${at}.liquidOd`}
        label={t('units.lineSet.liquidPipe')}
        placeholder={t('units.form.choose')}
        choices={sizes}
      />
      <FormSelect
        name={`${at}.gasOd`}
        label={t('units.lineSet.gasPipe')}
        placeholder={t('units.form.notSaid')}
        choices={sizes}
      />
      <FormQuantity
        kind="length"
        name={`${at}.length`}
        label={t('units.lineSet.length')}
        units={['m', 'ft', 'in']}
        max={10_000}
        example={preferences.length === 'ft' ? '39ft 4in' : '12 m'}
      />
      <FormQuantity
        kind="length"
        name={`${at}.rise`}
        label={t('units.lineSet.riseField')}
        hint={t('units.form.optional')}
        units={['m', 'ft']}
        allowNegative
        min={-1000}
        max={1000}
      />
      <FormText
        name={`${at}.bends`}
        label={t('units.lineSet.bendsField')}
        hint={t('units.form.optional')}
        inputMode="numeric"
        autoComplete="off"
      />
      <FormQuantity
        kind="length"
        name={`${at}.equivalent`}
        label={t('units.lineSet.equivalent')}
        hint={t('units.form.optional')}
        units={['m', 'ft']}
        max={20}
      />
      <FormCheck name={`${at}.reused`} label={t('units.lineSet.reusedField')} />
      {reused ? (
        <FormCheck
          name={`${at}.reuseChecked`}
          label={t('units.lineSet.reuseChecked')}
          hint={t('units.lineSet.reuseCheckedHint')}
        />
      ) : null}
    </>
  );
}
