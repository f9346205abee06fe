import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';
import { useExportPath } from '../../api/exports.ts';
import { entryMarks, placeWords, reasonWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { Fact, Facts } from '../../ui/facts.tsx';
import { Figure } from '../../ui/figure.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { GroupEntries } from './group-entries.tsx';
import { GroupReadings } from './group-readings.tsx';
import { Mark } from './log-columns.tsx';
import { StandingBeams } from './standing-beams.tsx';

/** A group as it stands in the log: the mass, where from and to, by which readings, why, who, and what is tied to it. */
export function GroupDetails({ group, main }: { group: GroupView; main: EntryRow | undefined }) {
  const t = useMessages();
  const format = useFormat();
  const marks = main ? entryMarks(t, main, format.month) : [];
  return (
    <>
      <header>
        <p className="type-label text-ink-soft">
          {t('log.group.clock', { when: format.longDateTime(group.occurredAt, group.timeZone) })}
        </p>
        {main ? <BigMass entry={main} struck={group.reversedByGroupId !== null} /> : null}
        <p className="mt-1.5 flex flex-wrap items-center gap-2">
          <span>{main ? `${reasonWords(t, main)}, ${main.refrigerant}` : t(`log.kind.${group.kind}`)}</span>
          {marks.map((mark) => (
            <Mark key={mark}>{mark}</Mark>
          ))}
        </p>
      </header>
      {main ? <StandingBeams group={group} main={main} /> : null}
      <Facts>
        {main ? (
          <>
            <Fact name={t('log.from')}>
              <PlaceLink place={main.from} />
            </Fact>
            <Fact name={t('log.to')}>
              <PlaceLink place={main.to} />
            </Fact>
          </>
        ) : null}
        {group.unitId && !unitIsAnEnd(main) ? (
          <Fact name={t('log.group.unit')}>
            <Link to={`/units/${group.unitId}`}>{group.unitLabel}</Link>
          </Fact>
        ) : null}
        <GroupReadings readings={group.readings} main={main} />
        {group.reason ? <Fact name={t('log.group.reason')}>{group.reason}</Fact> : null}
        {group.note ? <Fact name={t('log.group.note')}>{group.note}</Fact> : null}
        <UnitLeft group={group} />
        <Evacuated level={group.recoveryLevel} />
        <Documents group={group} />
        <Fact name={t('log.group.who')}>{group.recordedByName}</Fact>
        {group.supervisedByName ? <Fact name={t('log.group.supervised')}>{group.supervisedByName}</Fact> : null}
        <Fact name={t('log.group.recorded')}>{format.longDateTime(group.recordedAt, group.timeZone)}</Fact>
        {group.hash ? (
          <Fact name={t('log.group.hash')}>
            <span className="font-mono text-[0.875rem]" title={group.hash}>
              {group.hash.slice(0, 8)} {'\u2026'} {group.hash.slice(-4)}
            </span>{' '}
            <span className="type-label text-[0.875rem] text-ink-soft">{t('log.group.hashOf')}</span>
          </Fact>
        ) : null}
      </Facts>
      <OpenWeighIn group={group} />
      <GroupEntries group={group} main={main} />
      {group.jobId ? <JobRecord jobId={group.jobId} /> : null}
    </>
  );
}

function BigMass({ entry, struck }: { entry: EntryRow; struck: boolean }) {
  const format = useFormat();
  const t = useMessages();
  const asTyped = entry.typed ? format.massAsTyped(entry.typed, entry.massG) : null;
  return (
    <p className={`type-figure mt-1 text-[2.625rem] ${struck ? 'text-ink-soft' : 'text-move'}`}>
      <Figure pieces={format.massPieces(entry.massG)} className={struck ? 'line-through decoration-2' : ''} />
      {asTyped ? (
        <span className="type-label block pt-1.5 text-[0.9375rem] leading-tight font-[400] tracking-normal text-ink-soft">
          {t('log.group.typed', { typed: asTyped })}
        </span>
      ) : null}
    </p>
  );
}

const unitIsAnEnd = (entry: EntryRow | undefined) => entry?.from.place === 'unit' || entry?.to.place === 'unit';

/** A cylinder and a unit lead to their pages. */
export function PlaceLink({ place }: { place: EntryRow['from'] }): ReactNode {
  const t = useMessages();
  const words = placeWords(t, place);
  const page = PAGES[place.place];
  return page && place.id ? <Link to={`${page}/${place.id}`}>{words}</Link> : words;
}
const PAGES: Record<string, string | undefined> = { cylinder: '/cylinders', unit: '/units' };

/** How full the unit was said to be left. */
function UnitLeft({ group }: { group: GroupView }) {
  const t = useMessages();
  return group.statements.map((statement) => (
    <Fact key={statement.id} name={t('log.group.state')}>
      {stateWords(t, statement)}
    </Fact>
  ));
}

function stateWords(t: Translate, { is, by }: GroupView['statements'][number]): string {
  return t(`log.group.state.${by ? `${is}.${by}` : is}`);
}

/** The level reached before the unit was opened, beside the one that the law asks for. */
function Evacuated({ level }: { level: GroupView['recoveryLevel'] }) {
  const t = useMessages();
  if (!level) return null;
  const { required, reached, exception, clause } = level;
  return (
    <Fact name={t('log.group.level')}>
      {reached ? t(`log.group.level.${reached.unit}`, { value: reached.value }) : t('log.group.level.notTold')}
      {exception ? <span className="block">{t(`log.group.level.exception.${exception}`)}</span> : null}
      <span className="type-label block text-[0.875rem] text-ink-soft">
        {t('log.group.level.required', {
          level: t(`log.group.level.${required.unit}`, { value: required.value }),
          clause,
        })}
      </span>
    </Fact>
  );
}

interface GroupDocument {
  kind: string;
  number: string;
  date: string;
}
/** Answers are trusted in their types, but a document is kept as it was sent. */
const isDocument = (value: Record<string, unknown>): value is Record<string, unknown> & GroupDocument =>
  typeof value.number === 'string' && typeof value.date === 'string';

function Documents({ group }: { group: GroupView }) {
  const t = useMessages();
  const format = useFormat();
  const papers = group.documents.filter(isDocument);
  if (papers.length === 0 && group.kind !== 'purchase') return null;
  return (
    <Fact name={t('log.group.documents')}>
      {papers.length === 0
        ? t('log.group.noDocument')
        : papers.map(({ kind, number, date }) => (
            <span key={`${kind} ${number}`} className="block">
              {t(`log.group.document.${kind}`, { number, date: format.day(date) })}
            </span>
          ))}
    </Fact>
  );
}

function JobRecord({ jobId }: { jobId: string }) {
  const t = useMessages();
  return <TakeOutLink to={useExportPath('jobRecord', { jobId })} label={t('log.group.jobRecord')} />;
}

function OpenWeighIn({ group }: { group: GroupView }) {
  const t = useMessages();
  if (!group.openWeighIn) return null;
  if (!group.closedByGroupId) return <p>{t('log.group.openWeighIn')}</p>;
  return (
    <p>
      {t('log.group.closed')} <Link to={`/log/${group.closedByGroupId}`}>{t('log.group.toClosing')}</Link>
    </p>
  );
}
