import { useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { cylinderQueries } from '../../api/cylinders.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { FORMS } from './all-forms.ts';
import type { RecordForm } from './form.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('record')]);
  return null;
}

interface Line {
  key: string;
  to: string;
}

/** Everything that can be recorded, most used first; from a unit or a cylinder only what concerns it. */
export function Component() {
  const t = useMessages();
  const [search] = useSearchParams();
  const unitId = search.get('unit') ?? '';
  const cylinderId = search.get('cylinder') ?? '';
  const unit = useQuery({ ...unitQueries.one(unitId), enabled: unitId !== '' }).data;
  const cylinder = useQuery({ ...cylinderQueries.one(cylinderId), enabled: cylinderId !== '' }).data;
  const mayPost = usePermission('entries:post');
  const mayCorrect = usePermission('registers:correct');
  const query = unitId ? `?unit=${unitId}` : cylinderId ? `?cylinder=${cylinderId}` : '';
  const offered = FORMS.filter(({ permission }) => (permission === 'entries:post' ? mayPost : mayCorrect));
  const lines = (about: RecordForm['about']): Line[] =>
    offered
      .filter((form) => form.about === about)
      .map(({ kind }) => ({ key: `record.form.${kind}`, to: `/record/${kind}${query}` }));
  const onUnit: Line[] = unitId
    ? [{ key: 'record.form.weighIn', to: `/units/${unitId}/weigh-in` }, ...lines('unit')]
    : lines('unit');
  const title = unit
    ? t('record.titleUnit', { tag: unit.tag })
    : cylinder
      ? t('record.titleCylinder', { tag: cylinder.tag })
      : t('record.title');
  return (
    <Page field title={title} lead={t('record.lead')}>
      <div className="page-gutter grid max-w-[80rem] gap-x-14 gap-y-8 pt-4 lg:grid-cols-2">
        {mayPost ? null : <Notice title={t('record.notPermitted')} />}
        {cylinderId ? null : <Part title={t('record.part.unit')} lines={onUnit} />}
        {unitId ? null : <Part title={t('record.part.cylinder')} lines={lines('cylinder')} />}
        {unitId || cylinderId ? null : <Part title={t('record.part.papers')} lines={lines('papers')} />}
      </div>
    </Page>
  );
}

function Part({ title, lines }: { title: string; lines: readonly Line[] }) {
  const t = useMessages();
  if (lines.length === 0) return null;
  return (
    <section aria-label={title} className="min-w-0">
      <h2 className="type-label border-b-2 border-ink pb-1 font-[640]">{title}</h2>
      <ul>
        {lines.map(({ key, to }) => (
          <li key={to} className="border-b border-rule">
            <Link to={to} className="flex min-h-14 items-center justify-between gap-4 py-2 no-underline hover:bg-well">
              <span className="leading-tight">
                <span className="font-[600] text-ink">{t(key)}</span>
                <span className="type-label block text-[0.9375rem] text-ink-soft">{t(`${key}.lead`)}</span>
              </span>
              <svg
                aria-hidden="true"
                viewBox="0 0 6 10"
                className="h-2.5 w-1.5 shrink-0 fill-none stroke-rest stroke-[1.8]"
              >
                <path d="M1 1l4 4-4 4" />
              </svg>
            </Link>
          </li>
        ))}
      </ul>
    </section>
  );
}
