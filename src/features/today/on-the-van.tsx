import { Link } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { isRetestOverdue } from '../../../shared/cylinders/retest.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { cylinderBeam } from '../../ui/beam/presets.ts';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { Empty } from '../../ui/notice.tsx';
import { Section } from './section.tsx';

/** The cylinders that this person holds, each on its beam: tare, contents, limit. */
export function OnTheVan({ cylinders }: { cylinders: readonly Cylinder[] }) {
  const t = useMessages();
  const format = useFormat();
  const totalG = cylinders.reduce((sum, cylinder) => sum + cylinder.contentG, 0);
  return (
    <Section
      title={t('today.onTheVan')}
      count={
        cylinders.length > 0
          ? t('today.onTheVan.count', { count: cylinders.length, mass: format.massAbout(totalG) })
          : undefined
      }
    >
      {cylinders.length === 0 ? (
        <Empty
          title={t('today.onTheVan.none')}
          action={
            <ButtonLink kind="plain" to="/cylinders">
              {t('today.onTheVan.act')}
            </ButtonLink>
          }
        >
          {t('today.onTheVan.none.text')}
        </Empty>
      ) : (
        <ul className="grid gap-x-12 md:grid-cols-2 wide:grid-cols-3">
          {cylinders.map((cylinder) => (
            <CylinderOnVan key={cylinder.id} cylinder={cylinder} />
          ))}
        </ul>
      )}
    </Section>
  );
}

function CylinderOnVan({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const format = useFormat();
  const beamUnit = useBeamUnit();
  const { tag, tareG, contentG, limitG, refrigerant, mixed, retestDue } = cylinder;
  const said = (key: string, massG: number) => ({ massG, label: t(key, { mass: format.massAbout(massG) }) });
  const tare = said('today.beam.tare', tareG);
  const contents = said('today.beam.contents', contentG);
  const limit = limitG === null ? null : said('today.beam.limit', tareG + limitG);
  const retestPast = retestDue !== null && isRetestOverdue(retestDue, toDayInput(deviceNow()));
  const words = [
    ...(mixed ? [t('today.cylinder.mixed')] : []),
    ...(retestPast ? [t('today.cylinder.retest', { month: format.month(retestDue.slice(0, 7)) })] : []),
    ...(cylinder.openWeighInGroupId ? [t('today.cylinder.open')] : []),
  ];
  return (
    <li className="border-b border-rule">
      <Link to={`/cylinders/${cylinder.id}`} className="block pt-3 pb-2 text-ink no-underline hover:bg-well">
        <span className="flex items-baseline justify-between gap-4">
          <span>
            <strong className="text-[1.25rem] font-[680]">{tag}</strong>{' '}
            <span className="type-label text-ink-soft">{refrigerant}</span>
          </span>
          <strong className="text-[1.25rem] font-[680]">{format.massAbout(contentG)}</strong>
        </span>
        {words.length > 0 ? <span className="block text-[0.9375rem] font-[600]">{words.join(' ')}</span> : null}
        <Beam
          spec={cylinderBeam({ tare, contents, fillLimit: limit }, beamUnit)}
          summary={limit?.label ?? ''}
          inControl
        />
      </Link>
    </li>
  );
}
