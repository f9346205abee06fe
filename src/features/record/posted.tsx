import { Link } from 'react-router-dom';
import { useMessages } from '../../lib/messages.ts';
import { Button, ButtonLink } from '../../ui/button.tsx';
import { Done } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';

/** It stands in the log; where to look at it, and what may come next. */
export function Posted({
  kind,
  groupId,
  unitId,
  cylinderId,
  onAgain,
}: {
  kind: string;
  groupId: string;
  unitId: string;
  cylinderId: string;
  onAgain: () => void;
}) {
  const t = useMessages();
  return (
    <Page field title={t(`record.form.${kind}`)}>
      <div className="page-gutter flex max-w-xl flex-col gap-4 pt-6">
        <Done>{t('record.posted')}</Done>
        <ButtonLink kind="act" wide to={unitId ? `/units/${unitId}` : cylinderId ? `/cylinders/${cylinderId}` : '/'}>
          {t(unitId ? 'record.posted.toUnit' : cylinderId ? 'record.posted.toCylinder' : 'record.posted.toToday')}
        </ButtonLink>
        <div className="flex flex-wrap gap-x-6">
          <Link to={`/log/${groupId}`} className="inline-flex min-h-12 items-center">
            {t('record.posted.toLog')}
          </Link>
          {kind === 'relocation' && unitId ? (
            <Link to={`/units/${unitId}/line-set`} className="inline-flex min-h-12 items-center">
              {t('record.posted.lineSet')}
            </Link>
          ) : null}
          <Button kind="quiet" onClick={onAgain}>
            {t('record.posted.again')}
          </Button>
        </div>
      </div>
    </Page>
  );
}
