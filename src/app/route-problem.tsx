import { useEffect } from 'react';
import { isRouteErrorResponse, Link, useLocation, useRevalidator, useRouteError } from 'react-router-dom';
import { NetworkError, Problem, reportClientError } from '../api/http.ts';
import { useMessages } from '../lib/messages.ts';
import { Button } from '../ui/button.tsx';
import { Page } from '../ui/page.tsx';

/**
 * Where a page's error ends. It says what is wrong and what to do; what was typed is kept in the tab and is there again
 * after "try again". `bare` is the last net, outside the frame.
 */
export function RouteProblem({ bare = false }: { bare?: boolean }) {
  const t = useMessages();
  const error = useRouteError();
  const location = useLocation();
  const revalidator = useRevalidator();
  const kind = kindOf(error);
  useEffect(() => {
    if (kind === 'bug') reportClientError(error, location.pathname);
  }, [kind, error, location.pathname]);
  const requestId = error instanceof Problem ? error.requestId : null;
  const page = (
    <Page title={t(`frame.problem.${kind}.title`)}>
      <div className="page-gutter flex max-w-xl flex-col items-start gap-5 pt-4">
        <p>{error instanceof Problem && kind === 'refused' ? error.message : t(`frame.problem.${kind}.text`)}</p>
        {requestId ? <p className="type-label text-ink-soft">{t('frame.problem.requestId', { requestId })}</p> : null}
        {kind === 'notFound' ? (
          <Link to="/charge" className="inline-flex min-h-12 items-center">
            {t('frame.problem.toCharge')}
          </Link>
        ) : (
          <Button onClick={() => (kind === 'bug' ? window.location.reload() : void revalidator.revalidate())}>
            {t('frame.problem.again')}
          </Button>
        )}
      </div>
    </Page>
  );
  return bare ? <main>{page}</main> : page;
}

type Kind = 'notFound' | 'offline' | 'refused' | 'failed' | 'bug';

function kindOf(error: unknown): Kind {
  if (isRouteErrorResponse(error)) return error.status === 404 ? 'notFound' : 'failed';
  if (error instanceof NetworkError) return 'offline';
  if (error instanceof Problem) return error.status === 404 ? 'notFound' : error.status >= 500 ? 'failed' : 'refused';
  // A chunk of the program that cannot be fetched: no network, or a newer version has replaced it.
  if (error instanceof TypeError && /import|fetch/i.test(error.message)) return 'offline';
  return 'bug';
}
