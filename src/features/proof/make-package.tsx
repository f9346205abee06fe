import { useQuery } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { PAPERS } from '../../../shared/proof/proof.schema.ts';
import { customerQueries } from '../../api/customers.ts';
import { useStartExport } from '../../api/exports.ts';
import { unitQueries } from '../../api/units.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { Button } from '../../ui/button.tsx';
import { CheckField, ChoiceField, SelectField, TextField } from '../../ui/field.tsx';
import { Failed, Notice } from '../../ui/notice.tsx';

type Paper = (typeof PAPERS)[number];
type Subject = 'period' | 'unit' | 'customer';

/** The subject that a link asked for: `/log/proof?unitId=...`, `?customerId=...` or `?from=2026-11-01&to=2026-11-30`. */
export interface Asked {
  unitId: string | null;
  customerId: string | null;
  from: string | null;
  to: string | null;
}

/** The same id for the same request: sent once more after its answer was lost, it is still the one package. */
function useIdOf(): (request: string) => string {
  const last = useRef<{ request: string; id: string } | null>(null);
  return (request) => {
    if (last.current?.request !== request) last.current = { request, id: newId() };
    return last.current.id;
  };
}

/** A package for somebody else, made among the exports. `held`: the server can seal, without which there is none. */
export function MakePackage({ asked, held }: { asked: Asked; held: boolean }) {
  const t = useMessages();
  const navigate = useNavigate();
  const start = useStartExport();
  const newIdOf = useIdOf();
  const [kind, setKind] = useState<Subject>(asked.unitId ? 'unit' : asked.customerId ? 'customer' : 'period');
  const [unitId, setUnitId] = useState(asked.unitId ?? '');
  const [customerId, setCustomerId] = useState(asked.customerId ?? '');
  const [days, setDays] = useState(() => {
    const now = deviceNow();
    return { from: asked.from ?? `${now.getFullYear()}-01-01`, to: asked.to ?? toDayInput(now) };
  });
  const [words, setWords] = useState(false);
  const [paper, setPaper] = useState('');
  const isChosen = {
    period: days.from !== '' && days.to !== '' && days.from <= days.to,
    unit: unitId !== '',
    customer: customerId !== '',
  }[kind];
  const subject = { period: days, unit: { unitId }, customer: { customerId } }[kind];
  const filters = { ...subject, words, ...(paper === '' ? {} : { paper: paper as Paper }) };
  const send = () =>
    start.mutate(
      { id: newIdOf(JSON.stringify(filters)), what: 'proofPackage', format: 'zip', filters },
      { onSuccess: () => void navigate('/exports') },
    );
  return (
    <section className="flex max-w-prose flex-col gap-3" aria-labelledby="proof-make">
      <h2 id="proof-make" className="type-title text-[1.25rem]">
        {t('proof.make.title')}
      </h2>
      <p className="text-ink-soft">{t('proof.make.lead')}</p>
      <ChoiceField
        label={t('proof.make.about')}
        name="proof-about"
        value={kind}
        choices={(['period', 'unit', 'customer'] as const).map((value) => ({ value, label: t(`proof.make.${value}`) }))}
        onChange={(value) => setKind(value as Subject)}
      />
      {kind === 'period' ? (
        <div className="grid grid-cols-2 gap-4">
          {(['from', 'to'] as const).map((end) => (
            <TextField
              key={end}
              type="date"
              label={t(`proof.make.${end}`)}
              value={days[end]}
              onChange={(event) => setDays({ ...days, [end]: event.target.value })}
            />
          ))}
        </div>
      ) : null}
      {kind === 'period' && !isChosen && days.from && days.to ? (
        <Notice role="status">{t('proof.make.backwards')}</Notice>
      ) : null}
      {kind === 'unit' ? <UnitChoice value={unitId} onChange={setUnitId} /> : null}
      {kind === 'customer' ? <CustomerChoice value={customerId} onChange={setCustomerId} /> : null}
      <SelectField
        label={t('proof.make.paper')}
        value={paper}
        onChange={(event) => setPaper(event.target.value)}
        choices={[
          { value: '', label: t('proof.make.paperOfCountry') },
          { value: 'A4', label: 'A4' },
          { value: 'Letter', label: 'Letter' },
        ]}
      />
      <CheckField
        label={t('proof.make.words')}
        hint={t('proof.make.wordsHint')}
        checked={words}
        onChange={(event) => setWords(event.target.checked)}
      />
      {start.isError ? <Failed title={t('proof.make.notStarted')} error={start.error} /> : null}
      {isChosen && held ? (
        <Button kind="act" className="self-start" busy={start.isPending} onClick={send}>
          {t('proof.make.start')}
        </Button>
      ) : (
        <Notice>{t(held ? 'proof.make.choose' : 'proof.make.cannotSeal')}</Notice>
      )}
    </section>
  );
}

/** A native list of what fits the words typed: a firm has more units than a list of all would bear. */
function UnitChoice({ value, onChange }: { value: string; onChange: (id: string) => void }) {
  const t = useMessages();
  const [search, setSearch] = useState('');
  const found = useQuery({ ...unitQueries.one(value), enabled: value !== '' });
  const list = useQuery({
    queryKey: [...unitQueries.all(), 'proof-choice', search] as const,
    queryFn: async ({ client }) =>
      (await client.fetchInfiniteQuery(unitQueries.list({ search: search || undefined }, 50))).pages[0]?.items ?? [],
  });
  const units = list.data ?? [];
  const chosen = found.data && !units.some(({ id }) => id === value) ? [found.data] : [];
  return (
    <div className="grid gap-4 xs:grid-cols-2">
      <TextField
        type="search"
        label={t('proof.make.unitSearch')}
        value={search}
        onChange={(event) => setSearch(event.target.value)}
      />
      <SelectField
        label={t('proof.make.unit')}
        placeholder={t('proof.make.pick')}
        value={value}
        onChange={(event) => onChange(event.target.value)}
        choices={[...chosen, ...units].map(({ id, tag, name, siteName }) => ({
          value: id,
          label: `${tag}, ${name}, ${siteName}`,
        }))}
      />
    </div>
  );
}

function CustomerChoice({ value, onChange }: { value: string; onChange: (id: string) => void }) {
  const t = useMessages();
  const customers = useQuery(customerQueries.choice());
  return (
    <SelectField
      label={t('proof.make.customer')}
      placeholder={t('proof.make.pick')}
      value={value}
      onChange={(event) => onChange(event.target.value)}
      choices={customers.data?.map(({ id, name }) => ({ value: id, label: name })) ?? []}
    />
  );
}
