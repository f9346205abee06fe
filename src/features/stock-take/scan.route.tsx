import { useQuery } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { Link, type LoaderFunctionArgs, useNavigate } from 'react-router-dom';
import { cylinderQueries } from '../../api/cylinders.ts';
import { requireSession } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { useTypedFilter } from '../../lib/typed-filter.ts';
import { Button } from '../../ui/button.tsx';
import { TextField } from '../../ui/field.tsx';
import { Failed, Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { useCamera } from './use-camera.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('stock-take')]);
  return null;
}

/** The tag of a cylinder opens the cylinder: by the camera, or by its number. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const video = useRef<HTMLVideoElement>(null);
  const { state, start, stop } = useCamera(video, (cylinderId) => void navigate(`/cylinders/${cylinderId}`));
  const running = state === 'starting' || state === 'on' || state === 'other';
  return (
    <Page
      field
      title={t('scan.title')}
      actions={
        <Link to="/cylinders" className="inline-flex min-h-12 items-center">
          {t('stockTake.toCylinders')}
        </Link>
      }
    >
      <div className="page-gutter grid w-full max-w-5xl gap-x-12 gap-y-6 pt-4 desk:grid-cols-2">
        <section className="flex flex-col gap-3">
          {state === 'insecure' ? <Notice title={t('scan.insecure')}>{t('scan.insecureText')}</Notice> : null}
          {state === 'none' ? <Notice title={t('scan.noCamera')}>{t('scan.noCameraText')}</Notice> : null}
          {state === 'refused' ? (
            <Notice role="alert" title={t('scan.refused')}>
              {t('scan.refusedText')}
            </Notice>
          ) : null}
          <video
            ref={video}
            muted
            playsInline
            aria-label={t('scan.view')}
            className={running ? 'aspect-square w-full border-2 border-ink bg-well object-cover' : 'hidden'}
          />
          {running ? (
            <>
              <p role="status">{state === 'other' ? t('scan.other') : t('scan.aim')}</p>
              <Button onClick={stop}>{t('scan.stop')}</Button>
            </>
          ) : state === 'insecure' || state === 'none' ? null : (
            <Button kind="act" wide onClick={() => void start()}>
              {t('scan.start')}
            </Button>
          )}
        </section>
        <FindByNumber />
      </div>
    </Page>
  );
}

function FindByNumber() {
  const t = useMessages();
  const format = useFormat();
  const [search, setSearch] = useState('');
  const [typed, type] = useTypedFilter(search, setSearch);
  const found = useQuery({ ...cylinderQueries.choice({ search }), enabled: search !== '' });
  return (
    <section className="flex flex-col gap-2">
      <h2 className="type-title text-[1.25rem]">{t('scan.find')}</h2>
      <TextField
        big
        type="search"
        label={t('scan.tag')}
        value={typed}
        autoComplete="off"
        spellCheck={false}
        onChange={(event) => type(event.target.value)}
      />
      {found.isError ? <Failed error={found.error} onRetry={() => void found.refetch()} /> : null}
      <div aria-live="polite">
        {found.data?.items.length === 0 ? <p className="py-3">{t('scan.none')}</p> : null}
        <ul>
          {found.data?.items.slice(0, 20).map(({ id, tag, refrigerant, contentG, heldByName }) => (
            <li key={id} className="border-b border-rule">
              <Link
                to={`/cylinders/${id}`}
                className="flex min-h-14 items-center justify-between gap-4 text-ink no-underline hover:bg-well"
              >
                <span>
                  <strong className="text-[1.25rem] font-[680]">{tag}</strong>{' '}
                  <span className="type-label text-ink-soft">
                    {refrigerant}
                    {heldByName === null ? '' : `, ${t('scan.heldBy', { name: heldByName })}`}
                  </span>
                </span>
                <strong className="font-[650]">{format.mass(contentG)}</strong>
              </Link>
            </li>
          ))}
        </ul>
      </div>
    </section>
  );
}
