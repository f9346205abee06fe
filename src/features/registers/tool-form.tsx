import { useQuery } from '@tanstack/react-query';
import { useWatch } from 'react-hook-form';
import { createToolRequest, TOOL_KINDS, type Tool, updateToolRequest } from '../../../shared/tools/tools.schema.ts';
import { answerErrors, schemaErrors } from '../../api/form-errors.ts';
import { peopleQueries } from '../../api/people.ts';
import { usePermission } from '../../api/session.ts';
import { useCreateTool, useUpdateTool } from '../../api/tools.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { FormQuantity, FormSelect, FormText, RequestForm, useRequestForm } from '../../ui/request-form.tsx';
import { emptyTool, type ToolValues, toolRequest, valuesOfTool } from './tool-values.ts';

/** A scale with its accuracy, or another tool. A new accuracy holds for readings from now on. */
export function ToolForm({ tool, onDone }: { tool: Tool | null; onDone: (message: string) => void }) {
  const t = useMessages();
  const { locale } = usePreferences();
  const create = useCreateTool();
  const update = useUpdateTool({ id: tool?.id ?? '', version: tool?.version ?? 0 });
  const { form, submit, forget } = useRequestForm<ToolValues>({
    draftKey: `tool.${tool?.id ?? 'new'}`,
    initial: () => (tool ? valuesOfTool(tool, locale) : emptyTool(newId())),
    toRequest: (values) => toolRequest(values, locale, tool !== null) as never,
    check: (request) => schemaErrors(tool ? updateToolRequest : createToolRequest, request),
    places: () => [
      ['/name', 'name'],
      ['/serial', 'serial'],
      ['/scale/resolutionG', 'resolution'],
      ['/scale/repeatabilityG', 'repeatability'],
      ['/scale/spanErrorRelative', 'spanPercent'],
      ['/scale/offsetG', 'offset'],
      ['/scale', 'resolution'],
      ['/madeOn', 'madeOn'],
      ['/lastCheckedOn', 'lastCheckedOn'],
      ['/heldBy', 'heldBy'],
    ],
  });
  const send = submit(async (request) => {
    const saved = tool ? await update.mutateAsync(request) : await create.mutateAsync(request);
    forget();
    onDone(t(tool ? 'registers.changed' : 'registers.added', { name: saved.name }));
  }, answerErrors);
  return (
    <RequestForm id="tool" form={form} onSubmit={(event) => void send(event)}>
      {tool ? null : (
        <FormSelect
          name="kind"
          label={t('registers.kind')}
          choices={TOOL_KINDS.map((kind) => ({ value: kind, label: t(`registers.toolKind.${kind}`) }))}
        />
      )}
      <FormText name="name" label={t('registers.name')} maxLength={80} autoComplete="off" />
      <FormText name="serial" label={t('registers.serial')} maxLength={60} autoComplete="off" />
      <Accuracy />
      <FormText name="lastCheckedOn" type="date" label={t('registers.lastChecked')} />
      <FormText name="madeOn" type="date" label={t('registers.madeOn')} />
      <Holder />
      <Button kind="act" wide className="mt-3" type="submit" busy={form.formState.isSubmitting}>
        {t(tool ? 'registers.save' : 'registers.tools.act')}
      </Button>
    </RequestForm>
  );
}

const SMALL_UNITS = ['g', 'oz', 'kg', 'lb'] as const;

/** What a scale can tell: it goes into the uncertainty of every mass that is weighed with it. */
function Accuracy() {
  const t = useMessages();
  const kind = useWatch({ name: 'kind' }) as ToolValues['kind'];
  if (kind !== 'scale') return null;
  return (
    <fieldset className="border-l-4 border-rule py-1 pl-3">
      <legend className="sr-only">{t('registers.accuracy')}</legend>
      <p className="text-[0.9375rem] text-ink-soft">{t('registers.accuracyHint')}</p>
      <FormQuantity name="resolution" kind="mass" units={SMALL_UNITS} label={t('registers.resolution')} />
      <FormQuantity name="repeatability" kind="mass" units={SMALL_UNITS} label={t('registers.repeatability')} />
      <FormText name="spanPercent" inputMode="decimal" label={t('registers.spanErrorPercent')} autoComplete="off" />
      <FormQuantity name="offset" kind="mass" units={SMALL_UNITS} label={t('registers.offset')} />
    </fieldset>
  );
}

function Holder() {
  const t = useMessages();
  const seesPeople = usePermission('people:read');
  const people = useQuery({ ...peopleQueries.everybody(), enabled: seesPeople });
  if (!seesPeople) return null;
  return (
    <FormSelect
      name="heldBy"
      label={t('registers.holder')}
      placeholder={t('registers.nobody')}
      choices={people.data?.filter(({ active }) => active).map(({ id, name }) => ({ value: id, label: name })) ?? []}
    />
  );
}
