import { useQuery } from '@tanstack/react-query';
import { type ReactNode, useEffect, useState } from 'react';
import { Link, type LoaderFunctionArgs, useLoaderData } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { customerQueries } from '../../api/customers.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { partyQueries } from '../../api/parties.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, useSession } from '../../api/session.ts';
import { stockTakeQueries } from '../../api/stock-take.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { qrPath } from './qr-path.ts';
import './tag.css';

export async function loader({ request, params }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('stock-take')]);
  const id = params.cylinderId ?? '';
  const [cylinder, { address }] = await Promise.all([
    queryClient.ensureQueryData(cylinderQueries.one(id)),
    queryClient.ensureQueryData(stockTakeQueries.tagAddress(id)),
  ]);
  return { cylinder, address };
}

/** What hangs on the cylinder: its number large, what must never be guessed, and a code that opens its record. */
export function Component() {
  const t = useMessages();
  const { cylinder: loaded, address } = useLoaderData<typeof loader>();
  const cylinder = useQuery({ ...cylinderQueries.one(loaded.id), initialData: loaded }).data;
  return (
    <Page
      title={t('tag.title', { tag: cylinder.tag })}
      actions={
        <Link to={`/cylinders/${cylinder.id}`} className="inline-flex min-h-12 items-center">
          {t('tag.back')}
        </Link>
      }
    >
      <div className="page-gutter flex flex-col items-start gap-4 pt-4">
        <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
          <Button kind="act" onClick={() => window.print()}>
            {t('tag.print')}
          </Button>
          <p className="text-[0.9375rem] text-ink-soft">{t('tag.size')}</p>
        </div>
        <Tag cylinder={cylinder} address={address} />
      </div>
    </Page>
  );
}

function Tag({ cylinder, address }: { cylinder: Cylinder; address: string }) {
  const t = useMessages();
  const format = useFormat();
  const firm = useSession()?.firm.name ?? '';
  const owner = useOwner(cylinder.owner) ?? firm;
  const { tag, refrigerant, kind, contentState, tareG, tareTyped, limitG, retestDue } = cylinder;
  const stamped = format.massAsTyped(tareTyped, tareG);
  return (
    <article className="cylinder-tag flex flex-col p-[4mm]" aria-label={t('tag.title', { tag })}>
      <p className="flex items-baseline justify-between gap-3 border-b-2 border-black pb-1 text-[3.4mm] font-[600]">
        <span className="min-w-0 truncate">{firm}</span>
        <span className="shrink-0">{t(`tag.kind.${kind}`)}</span>
      </p>
      <p
        className="type-figure py-[2mm] leading-[0.95] [overflow-wrap:anywhere]"
        style={{ fontSize: `${Math.max(9, Math.min(24, 110 / Math.max(4, tag.length)))}mm` }}
      >
        {tag}
      </p>
      <p className="border-y-2 border-black py-[1.5mm] text-[7mm] leading-tight font-[700]">
        {refrigerant}
        <span className="pl-[2mm] text-[4mm] font-[500]">{t(`tag.state.${contentState}`)}</span>
      </p>
      <dl className="text-[3.8mm] leading-snug">
        <Line name={t('tag.tare')}>
          <strong>{stamped ?? format.mass(tareG)}</strong>
          {stamped === null ? null : ` (${format.mass(tareG)})`}
        </Line>
        <Line name={t('tag.limit')}>
          {limitG === null ? (
            t(kind === 'nonRefillable' ? 'tag.limitNone' : 'tag.limitNotKnown')
          ) : (
            <>
              <strong>{t('tag.limitGross', { mass: format.mass(limitG + tareG) })}</strong>
              <br />
              {t('tag.limitNet', { mass: format.mass(limitG) })}
            </>
          )}
        </Line>
        <Line name={t('tag.retest')}>
          {retestDue === null ? t('tag.notGiven') : format.month(retestDue.slice(0, 7))}
        </Line>
        <Line name={t('tag.owner')}>{owner}</Line>
      </dl>
      <div className="mt-auto flex items-end gap-[3mm] pt-[2mm]">
        <Code address={address} />
        <div className="min-w-0 flex-1 pb-[3mm] text-[3mm] leading-snug">
          <p className="font-[600]">{t('tag.scan')}</p>
          <p className="font-mono text-[2.3mm] [overflow-wrap:anywhere]">{address}</p>
        </div>
      </div>
    </article>
  );
}

const Line = ({ name, children }: { name: string; children: ReactNode }) => (
  <div className="grid grid-cols-[24mm_minmax(0,1fr)] border-b border-black py-[1mm]">
    <dt>{name}</dt>
    <dd className="min-w-0 [overflow-wrap:anywhere]">{children}</dd>
  </div>
);

function Code({ address }: { address: string }) {
  const t = useMessages();
  const [code, setCode] = useState<{ size: number; path: string } | null>(null);
  useEffect(() => {
    let stale = false;
    void qrPath(address).then((made) => {
      if (!stale) setCode(made);
    });
    return () => {
      stale = true;
    };
  }, [address]);
  if (code === null) return <div className="size-[42mm] shrink-0" aria-busy="true" />;
  return (
    <svg
      role="img"
      aria-label={t('tag.qr', { address })}
      viewBox={`0 0 ${code.size} ${code.size}`}
      shapeRendering="crispEdges"
      className="size-[42mm] shrink-0 bg-white"
    >
      <path d={code.path} fill="#000" />
    </svg>
  );
}

/** Who it belongs to, if it is not ours. */
function useOwner(owner: Cylinder['owner']): string | null {
  const party = useQuery({
    ...partyQueries.one(owner.kind === 'party' ? owner.id : ''),
    enabled: owner.kind === 'party',
  });
  const customer = useQuery({
    ...customerQueries.one(owner.kind === 'customer' ? owner.id : ''),
    enabled: owner.kind === 'customer',
  });
  if (owner.kind === 'ours') return null;
  return (owner.kind === 'party' ? party : customer).data?.name ?? '';
}
