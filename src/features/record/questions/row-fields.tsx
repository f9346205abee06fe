import { useQuery } from '@tanstack/react-query';
import { cylinderQueries } from '../../../api/cylinders.ts';
import { toolQueries } from '../../../api/tools.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { CheckField, ChoiceField, SelectField } from '../../../ui/field.tsx';
import { QuantityInput } from '../../../ui/quantity-input.tsx';
import { type FormContext, type RowMode, refrigerantIn, type WeighedRow } from '../answers.ts';
import type { Question } from '../form.ts';
import { gramsOf } from '../typed-mass.ts';
import { contentOf, massInto, massOutOf } from '../weighed-rows.ts';

const MASS_UNITS = ['g', 'kg', 'lb', 'oz'] as const;

interface Props {
  question: Extract<Question, { is: 'rows' }>;
  row: WeighedRow;
  index: number;
  context: FormContext;
  /** Of what will then be in it, where it is filled. */
  limitG: number | null;
  error: (field: string) => string | undefined;
  onChange: (part: Partial<WeighedRow>) => void;
}

/** One cylinder: which, how it is weighed, what the scale shows, and what that makes. */
export function RowFields({ question, row, index, context, limitG, error, onChange }: Props) {
  const t = useMessages();
  const format = useFormat();
  const { direction } = question;
  const at = `rows.${index}`;
  const cylinder = context.cylinder(row.cylinderId);
  const once = direction === 'once';
  const isLoss = question.id === 'lostCylinder';
  const mode: RowMode = isLoss ? 'book' : row.mode;
  const modes: RowMode[] = isLoss ? [] : once ? (question.byBook ? ['gross', 'book'] : []) : ['gross', 'zeroed'];
  return (
    <div className="flex flex-col">
      <CylinderSelect
        label={t(once ? 'record.rows.cylinder' : 'record.rows.onScale')}
        question={question}
        index={index}
        value={row.cylinderId}
        context={context}
        error={error(`${at}.cylinderId`)}
        onChange={(cylinderId) => onChange({ cylinderId })}
      />
      {cylinder ? (
        <p className="py-1 text-[0.9375rem] text-ink-soft">
          {t('record.rows.holds', {
            refrigerant: refrigerantIn(cylinder) ?? t('record.rows.mixed'),
            mass: format.mass(cylinder.contentG),
          })}
          {limitG !== null ? (
            <>
              {' '}
              {limitG >= cylinder.contentG
                ? t('record.rows.room', { mass: format.mass(limitG - cylinder.contentG) })
                : t('record.rows.noRoom', { mass: format.mass(cylinder.contentG - limitG) })}
            </>
          ) : null}
        </p>
      ) : null}
      {modes.length > 0 ? (
        <ChoiceField
          label={t('record.rows.how')}
          name={`${at}.mode`}
          value={mode}
          choices={modes.map((value) => ({ value, label: t(`record.mode.${value}`) }))}
          onChange={(value) => onChange({ mode: value as RowMode })}
        />
      ) : null}
      {mode === 'book' ? null : (
        <>
          <ScaleSelect value={row.toolId} onChange={(toolId) => onChange({ toolId })} />
          {mode === 'zeroed' ? null : (
            <QuantityInput
              kind="mass"
              label={t(once ? 'record.rows.gross' : 'record.rows.before')}
              units={MASS_UNITS}
              draft={row.before}
              {...(cylinder ? { hint: t('record.rows.tare', { mass: format.mass(cylinder.tareG) }) } : {})}
              error={error(`${at}.before`)}
              onChange={(before) => onChange({ before })}
            />
          )}
          {once ? null : (
            <QuantityInput
              kind="mass"
              label={t(mode === 'zeroed' ? 'record.rows.sinceZero' : 'record.rows.after')}
              units={MASS_UNITS}
              allowNegative={mode === 'zeroed'}
              draft={row.after}
              error={error(`${at}.after`)}
              onChange={(after) => onChange({ after })}
            />
          )}
        </>
      )}
      {question.hose && !(direction === 'transfer' && index === 1) ? (
        <Hose row={row} index={index} direction={direction} context={context} error={error} onChange={onChange} />
      ) : null}
      <Net question={question} row={{ ...row, mode }} index={index} context={context} />
    </div>
  );
}

/** What these readings make, as on paper. */
function Net({
  question,
  row,
  index,
  context,
}: {
  question: Props['question'];
  row: WeighedRow;
  index: number;
  context: FormContext;
}) {
  const t = useMessages();
  const format = useFormat();
  const { direction } = question;
  const fills = direction === 'into' || (direction === 'transfer' && index === 1);
  const mass =
    direction === 'once' ? contentOf(row, context) : fills ? massInto(row, context) : massOutOf(row, context);
  const massG = mass && gramsOf(mass);
  return (
    <p className="min-h-10 pt-2 text-right" aria-live="polite">
      {massG !== null && massG > 0
        ? t(direction === 'once' ? 'record.rows.content' : fills ? 'record.rows.cameIn' : 'record.rows.wentOut', {
            mass: format.mass(massG),
          })
        : null}
    </p>
  );
}

function Hose({
  row,
  index,
  direction,
  context,
  error,
  onChange,
}: Omit<Props, 'question' | 'limitG'> & { direction: Props['question']['direction'] }) {
  const t = useMessages();
  const at = `rows.${index}`;
  const ends = direction === 'transfer' ? (['lost', 'emptied'] as const) : (['emptied', 'lost', 'recovered'] as const);
  return (
    <>
      <CheckField
        label={t('record.hose.had')}
        checked={row.hasHose}
        onChange={(event) => onChange({ hasHose: event.target.checked })}
      />
      {row.hasHose ? (
        <div className="border-l-4 border-rule pl-3">
          <QuantityInput
            kind="mass"
            label={t('record.hose.content')}
            units={MASS_UNITS}
            draft={row.hose}
            error={error(`${at}.hose`)}
            onChange={(hose) => onChange({ hose })}
          />
          {row.mode === 'zeroed' ? null : (
            <CheckField
              label={t('record.hose.fullAtStart')}
              checked={row.hoseFullAtStart}
              onChange={(event) => onChange({ hoseFullAtStart: event.target.checked })}
            />
          )}
          <ChoiceField
            label={t('record.hose.end')}
            name={`${at}.hoseEnd`}
            value={row.hoseEnd}
            choices={ends.map((value) => ({
              value,
              label: t(`record.hose.${direction === 'transfer' && value === 'emptied' ? 'intoTaker' : value}`),
            }))}
            onChange={(value) => onChange({ hoseEnd: value as WeighedRow['hoseEnd'] })}
          />
          {row.hoseEnd === 'recovered' ? (
            <CylinderSelect
              label={t('record.hose.into')}
              question={{ is: 'rows', id: 'hose', direction: 'into', many: false, hose: false }}
              index={0}
              value={row.hoseInto}
              context={context}
              error={error(`${at}.hoseInto`)}
              onChange={(hoseInto) => onChange({ hoseInto })}
            />
          ) : null}
        </div>
      ) : null}
    </>
  );
}

/** Cylinders of the right kind first; the others stay choosable, for what has happened. */
function CylinderSelect({
  label,
  question,
  index,
  value,
  context,
  error,
  onChange,
}: {
  label: string;
  question: Props['question'];
  index: number;
  value: string;
  context: FormContext;
  error: string | undefined;
  onChange: (cylinderId: string) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const listed = useQuery(cylinderQueries.choice()).data?.items ?? [];
  const own = context.cylinder(value);
  const cylinders = own && !listed.some(({ id }) => id === own.id) ? [own, ...listed] : listed;
  const { direction } = question;
  const refrigerant = direction === 'into' || direction === 'outOf' ? (context.unit?.refrigerant ?? null) : null;
  const fits = (cylinder: (typeof cylinders)[number]) =>
    (refrigerant === null || cylinder.refrigerant === refrigerant) &&
    (direction === 'into' || (direction === 'transfer' && index === 1) ? cylinder.kind !== 'nonRefillable' : true) &&
    (direction === 'outOf' || direction === 'once' ? question.id === 'foundCylinder' || cylinder.contentG > 0 : true);
  const choice = (cylinder: (typeof cylinders)[number]) => ({
    value: cylinder.id,
    label: t('record.rows.option', {
      tag: cylinder.tag,
      refrigerant: cylinder.refrigerant,
      mass: format.mass(cylinder.contentG),
    }),
  });
  const fitting = cylinders.filter(fits);
  const others = cylinders.filter((cylinder) => !fits(cylinder));
  return (
    <SelectField
      layout="row"
      label={label}
      placeholder={t('record.rows.choose')}
      groups={[
        ...(fitting.length > 0 ? [{ label: t('record.rows.fitting'), choices: fitting.map(choice) }] : []),
        ...(others.length > 0 ? [{ label: t('record.rows.others'), choices: others.map(choice) }] : []),
      ]}
      value={value}
      error={error}
      onChange={(event) => onChange(event.target.value)}
    />
  );
}

/** A scale that is not named counts as one of 5 g steps. */
function ScaleSelect({ value, onChange }: { value: string; onChange: (toolId: string) => void }) {
  const t = useMessages();
  const scales = useQuery(toolQueries.choice('scale')).data ?? [];
  return (
    <SelectField
      layout="row"
      label={t('record.rows.scale')}
      placeholder={t('record.rows.noScale')}
      choices={scales.map(({ id, name }) => ({ value: id, label: name }))}
      value={value}
      onChange={(event) => onChange(event.target.value)}
    />
  );
}
