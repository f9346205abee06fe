import { useQuery } from '@tanstack/react-query';
import { useMemo, useRef, useState } from 'react';
import { Link, type LoaderFunctionArgs, useParams } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { Button } from '../../ui/button.tsx';
import { Caution } from '../../ui/caution.tsx';
import { Figure } from '../../ui/figure.tsx';
import { Done, Failed, Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { ActionDialog, type CylinderAction } from './action-dialog.tsx';
import { beamSummary, fullCylinderBeam } from './cylinder-beam.ts';
import { CylinderFacts } from './cylinder-facts.tsx';
import { CylinderEntries, CylinderReadings } from './cylinder-history.tsx';
import { dangersOf, marksOf } from './cylinder-marks.tsx';
import { JudgedAgain } from './judged-again.tsx';
import { OpenFlags } from './open-flags.tsx';
import { RecordLinks } from './record-links.tsx';
import { type CylinderFigures, useCylinderFigures } from './use-cylinder-figures.ts';

export async function loader({ request, params }: LoaderFunctionArgs) {
  await Promise.all([
    requireSession(request),
    loadMessages('cylinders-screen', 'log-screen', 'server', 'record-links', 'stock-take', 'flags'),
  ]);
  // A cylinder that is not there is the page's own "nothing here", with the frame around it.
  await queryClient.ensureQueryData(cylinderQueries.one(params.cylinderId ?? ''));
  return null;
}

export function Component() {
  const { cylinderId = '' } = useParams();
  const cylinder = useQuery(cylinderQueries.one(cylinderId));
  if (cylinder.data) return <CylinderPage key={cylinderId} cylinder={cylinder.data} />;
  return (
    <div className="page-gutter pt-6">
      {cylinder.isError ? <Failed error={cylinder.error} onRetry={() => void cylinder.refetch()} /> : null}
    </div>
  );
}

/** One cylinder: what is in it, on its beam, what it may hold and why, and everything that went in and out. */
function CylinderPage({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const format = useFormat();
  const [action, setAction] = useState<CylinderAction | null>(null);
  const [done, setDone] = useState<string | null>(null);
  const [judged, setJudged] = useState<EntryGroupResponse['entries'] | null>(null);
  const figures = useCylinderFigures(cylinder);
  const mayPost = usePermission('entries:post');
  const mayWrite = usePermission('cylinders:write');
  const top = useRef<HTMLDivElement>(null);
  const finish = (message: string | null, entries: EntryGroupResponse['entries'] | null = null) => {
    setAction(null);
    setDone(message);
    setJudged(entries);
    if (message || entries) top.current?.scrollIntoView?.({ block: 'nearest' });
  };
  const others: CylinderAction[] = [
    ...(mayPost ? (['buy'] as const) : []),
    ...(mayWrite ? (['assign', 'tare', 'change'] as const) : []),
  ];
  return (
    <Page
      field
      title={t('cylinders.one.title', { tag: cylinder.tag })}
      status={<span className="desk:hidden">{cylinder.refrigerant}</span>}
      actions={
        <>
          <Link to={`/cylinders/${cylinder.id}/statement`} className="inline-flex min-h-12 items-center">
            {t('cylinders.toStatement')}
          </Link>
          <Link to={`/cylinders/${cylinder.id}/tag`} className="inline-flex min-h-12 items-center">
            {t('rental.tagLink')}
          </Link>
          <Link to="/cylinders" className="inline-flex min-h-12 items-center">
            {t('cylinders.all')}
          </Link>
        </>
      }
      next={
        mayPost ? (
          <Button kind="act" wide className="desk:hidden" onClick={() => setAction('weigh')}>
            {t('cylinders.action.weigh')}
          </Button>
        ) : undefined
      }
    >
      <div
        ref={top}
        className="page-gutter grid w-full max-w-[90rem] scroll-mt-20 gap-x-12 gap-y-6 pt-4 lg:grid-cols-[minmax(0,28rem)_minmax(0,1fr)]"
      >
        <div className="flex min-w-0 flex-col gap-5">
          {done ? <Done>{done}</Done> : null}
          {judged ? <JudgedAgain cylinder={cylinder} entries={judged} /> : null}
          <Content cylinder={cylinder} figures={figures} />
          <Cautions cylinder={cylinder} />
          <OpenFlags cylinderId={cylinder.id} />
          {mayPost || mayWrite ? (
            <div className="grid grid-cols-2 gap-3 desk:flex desk:flex-wrap">
              {mayPost ? (
                <Button kind="act" className="not-desk:hidden" onClick={() => setAction('weigh')}>
                  {t('cylinders.action.weigh')}
                </Button>
              ) : null}
              {others.map((other) => (
                <Button key={other} onClick={() => setAction(other)}>
                  {t(`cylinders.action.${other}`)}
                </Button>
              ))}
              {mayPost ? <RecordLinks cylinderId={cylinder.id} /> : null}
            </div>
          ) : null}
          <CylinderFacts cylinder={cylinder} figures={figures} />
        </div>
        <div className="flex min-w-0 flex-col gap-8 text-base">
          <CylinderEntries cylinder={cylinder} />
          <CylinderReadings cylinder={cylinder} />
        </div>
      </div>
      <ActionDialog
        cylinder={cylinder}
        action={action}
        onClose={() => setAction(null)}
        onDone={finish}
        onRevised={(entries, tareG) => {
          // Read again by now: a revision that is dated before the present tare does not stand in its place.
          const stands = queryClient.getQueryData(cylinderQueries.one(cylinder.id).queryKey)?.tareG ?? tareG;
          const earlier = Math.abs(stands - tareG) > 1e-6;
          finish(
            earlier ? t('cylinders.tare.doneEarlier', { tare: format.massAbout(stands) }) : t('cylinders.tare.done'),
            entries,
          );
        }}
      />
    </Page>
  );
}

function Content({ cylinder, figures }: { cylinder: Cylinder; figures: CylinderFigures }) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const spec = useMemo(
    () => fullCylinderBeam(cylinder, figures.heelG, { t, format }, unit),
    [cylinder, figures.heelG, t, format, unit],
  );
  return (
    <section aria-label={t('cylinders.content')}>
      <p className="type-label text-ink-soft">
        {t('cylinders.one.holds', { refrigerant: cylinder.refrigerant, kind: t(`cylinders.kind.${cylinder.kind}`) })}
      </p>
      <p className="type-figure mt-1 text-[3.25rem]">
        <Figure pieces={format.massAboutPieces(cylinder.contentG)} />
      </p>
      {cylinder.limitG === null ? null : (
        <p className="mt-2 text-[1.0625rem] font-[600]">
          {cylinder.limitG >= cylinder.contentG
            ? t('cylinders.one.room', { mass: format.massAbout(cylinder.limitG - cylinder.contentG) })
            : t('cylinders.one.over', { mass: format.massAbout(cylinder.contentG - cylinder.limitG) })}
        </p>
      )}
      <Beam className="mt-2" spec={spec} summary={beamSummary(cylinder, { t, format })} />
    </section>
  );
}

function Cautions({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const mayPost = usePermission('entries:post');
  const marks = marksOf(cylinder, '');
  return (
    <>
      {dangersOf(cylinder).map((danger) => (
        <Caution key={danger} signal="danger">
          {t(`cylinders.stands.${danger}`)}
        </Caution>
      ))}
      {cylinder.openWeighInGroupId ? (
        <Notice title={t('cylinders.one.openWeighIn')}>
          {mayPost ? (
            <Link to={`/weigh-back/${cylinder.openWeighInGroupId}`}>{t('cylinders.one.weighBack')}</Link>
          ) : null}
        </Notice>
      ) : null}
      {marks.includes('neverWeighed') ? <Notice>{t('cylinders.one.neverWeighed')}</Notice> : null}
    </>
  );
}
