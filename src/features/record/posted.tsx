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
        <Done>{t(groupId ? 'record.posted' : 'record.posted.register')}</Done>
        <ButtonLink kind="act" wide to={unitId ? `/units/${unitId}` : cylinderId ? `/cylinders/${cylinderId}` : '/'}>
          {t(unitId ? 'record.posted.toUnit' : cylinderId ? 'record.posted.toCylinder' : 'record.posted.toToday')}
        </ButtonLink>
        <div className="flex flex-wrap gap-x-6">
          {groupId ? <Onward to={`/log/${groupId}`} words="record.posted.toLog" /> : null}
          {kind === 'relocation' && unitId ? (
            <Onward to={`/units/${unitId}/line-set`} words="record.posted.lineSet" />
          ) : null}
          {kind === 'retrofit' && unitId ? (
            <>
              <Onward to={`/units/${unitId}/weigh-in`} words="record.posted.weighIn" />
              <Onward to={`/units/${unitId}/charge-basis`} words="record.posted.chargeBasis" />
            </>
          ) : null}
          <Button kind="quiet" onClick={onAgain}>
            {t('record.posted.again')}
          </Button>
        </div>
      </div>
    </Page>
  );
}

function Onward({ to, words }: { to: string; words: string }) {
  const t = useMessages();
  return (
    <Link to={to} className="inline-flex min-h-12 items-center">
      {t(words)}
    </Link>
  );
}
