import { useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { ASSUMED_SCALE } from '../../../shared/ledger/scale.ts';
import { peopleQueries } from '../../api/people.ts';
import { requireSession, usePermission, useSession } from '../../api/session.ts';
import { IN_THE_SHOP, stockTakeQueries } from '../../api/stock-take.ts';
import { toolQueries } from '../../api/tools.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button, ButtonLink } from '../../ui/button.tsx';
import { SelectField, TextField } from '../../ui/field.tsx';
import { Empty, Failed, Notice, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { SheetLine } from './sheet-line.tsx';
import { SHEET_UNITS, type SheetUnit } from './sheet-state.ts';
import { Summary } from './summary.tsx';
import { useSheet } from './use-sheet.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('stock-take', 'server')]);
  return null;
}

/** Every cylinder of a van, each weighed once, on one sheet. */
export function Component() {
  const t = useMessages();
  const session = useSession();
  const [search, setSearch] = useSearchParams();
  // Whoever drives no van starts with the shop's own shelf, not with an empty sheet.
  const mine = session?.roles.includes('technician') ? session.person.id : IN_THE_SHOP;
  const holder = search.get('heldBy') ?? mine;
  const held = useQuery(stockTakeQueries.heldBy(holder));
  if (held.data && held.data.length > 0) {
    return <Sheet key={holder} holder={holder} cylinders={held.data} onHolder={choose} />;
  }
  return (
    <Page field title={t('stockTake.title')} actions={<ToCylinders />}>
      <div className="page-gutter flex flex-col gap-4 pt-4">
        <div className="max-w-xl">
          <HolderField holder={holder} onHolder={choose} />
        </div>
        {held.isError ? (
          <Failed error={held.error} onRetry={() => void held.refetch()} />
        ) : held.data ? (
          <Empty
            title={t('stockTake.none')}
            action={<ButtonLink to="/cylinders">{t('stockTake.toCylinders')}</ButtonLink>}
          >
            {t('stockTake.noneText')}
          </Empty>
        ) : (
          <RowsSkeleton rowClass="h-24" />
        )}
      </div>
    </Page>
  );

  function choose(heldBy: string) {
    setSearch({ heldBy }, { replace: true });
  }
}

const ToCylinders = () => (
  <Link to="/cylinders" className="inline-flex min-h-12 items-center">
    {useMessages()('stockTake.toCylinders')}
  </Link>
);

function HolderField({
  holder,
  disabled = false,
  onHolder,
}: {
  holder: string;
  disabled?: boolean;
  onHolder: (holder: string) => void;
}) {
  const t = useMessages();
  const session = useSession();
  const seesPeople = usePermission('people:read');
  const people = useQuery({ ...peopleQueries.everybody(), enabled: seesPeople });
  const known = people.data?.filter(({ active, id }) => active || id === holder) ?? [];
  const choices = [
    ...(known.length > 0
      ? known.map(({ id, name, van }) => ({ value: id, label: van ? `${name}, ${van}` : name }))
      : session
        ? [{ value: session.person.id, label: session.person.name }]
        : []),
    { value: IN_THE_SHOP, label: t('stockTake.nobody') },
  ];
  return (
    <SelectField
      layout="row"
      label={t('stockTake.who')}
      choices={choices}
      value={holder}
      disabled={disabled}
      onChange={(event) => onHolder(event.target.value)}
    />
  );
}

function Sheet({
  holder,
  cylinders,
  onHolder,
}: {
  holder: string;
  cylinders: readonly Cylinder[];
  onHolder: (holder: string) => void;
}) {
  const t = useMessages();
  const mayPost = usePermission('entries:post');
  const scales = useQuery(toolQueries.choice('scale'));
  const scaleOf = (toolId: string) => scales.data?.find(({ id }) => id === toolId)?.scale ?? ASSUMED_SCALE;
  const { sheet, busy, toSend, readingOf, setRow, set, setUnit, send, clear, begun } = useSheet(
    holder,
    cylinders,
    scaleOf,
  );
  const scale = scaleOf(sheet.toolId);
  const atMissing = sheet.at === '';
  return (
    <Page
      field
      title={t('stockTake.title')}
      lead={t('stockTake.lead')}
      actions={<ToCylinders />}
      next={
        !mayPost ? undefined : toSend.length === 0 && begun ? (
          <Button wide onClick={clear}>
            {t('stockTake.again')}
          </Button>
        ) : (
          <Button kind="act" wide busy={busy} disabled={toSend.length === 0 || atMissing} onClick={() => void send()}>
            {toSend.length === 0 ? t('stockTake.actNone') : t('stockTake.act', { count: toSend.length })}
          </Button>
        )
      }
    >
      <div className="page-gutter flex flex-col gap-4 pt-3">
        <div className="grid gap-x-10 desk:max-w-4xl lg:grid-cols-2">
          <HolderField holder={holder} disabled={busy} onHolder={onHolder} />
          <SelectField
            layout="row"
            label={t('stockTake.scale')}
            placeholder={t('stockTake.noScale')}
            choices={scales.data?.map(({ id, name }) => ({ value: id, label: name })) ?? []}
            value={sheet.toolId}
            disabled={begun || busy}
            onChange={(event) => set({ toolId: event.target.value })}
          />
          <SelectField
            layout="row"
            label={t('stockTake.unit')}
            choices={SHEET_UNITS.map((unit) => ({ value: unit, label: t(`stockTake.unit.${unit}`) }))}
            value={sheet.unit}
            disabled={busy}
            onChange={(event) => setUnit(event.target.value as SheetUnit)}
          />
          <TextField
            type="datetime-local"
            label={t('stockTake.at')}
            value={sheet.at}
            error={atMissing ? t('stockTake.atNeeded') : undefined}
            disabled={begun || busy}
            onChange={(event) => set({ at: event.target.value })}
          />
        </div>
        <Summary cylinders={cylinders} sheet={sheet} />
        {mayPost ? null : <Notice title={t('problem.notPermitted')} />}
        <ol className="border-t-2 border-ink">
          {cylinders.map((cylinder) => (
            <SheetLine
              key={cylinder.id}
              cylinder={cylinder}
              row={sheet.rows[cylinder.id]}
              reading={readingOf(sheet.rows[cylinder.id])}
              unit={sheet.unit}
              scale={scale}
              onChange={(change) => setRow(cylinder.id, change)}
            />
          ))}
        </ol>
      </div>
    </Page>
  );
}
