import { Link } from 'react-router-dom';
import type { OpenItem } from '../../../../shared/periods/periods.schema.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Button } from '../../../ui/button.tsx';
import { Disclosure } from '../../../ui/disclosure.tsx';
import { Section } from '../section.tsx';
import { Verdict } from '../verdict.tsx';
import { itemDetail, itemPath, itemTitle } from './item-words.ts';

type DifferenceOpen = Extract<OpenItem, { kind: 'difference' }>;
interface Decide {
  /** Both left out: only looked at. */
  onSettle?: (item: DifferenceOpen) => void;
  onCarry?: (items: readonly OpenItem[]) => void;
}
interface Props extends Decide {
  items: readonly OpenItem[];
  notListed: number;
  timeZone: string;
}

/** As many as one request carries. */
const MOST_AT_ONCE = 500;
const KINDS = ['difference', 'weighIn', 'cylinder', 'job'] as const;

/** What is open at the end of the month, by kind; what nobody has decided yet first. */
export function OpenItems({ items, notListed, timeZone, ...decide }: Props) {
  const t = useMessages();
  const needed = items.filter(({ needsDecision }) => needsDecision);
  const explained = items.filter(({ needsDecision }) => !needsDecision);
  return (
    <div className="flex flex-col gap-9">
      {needed.length === 0 ? (
        <Section title={t('books.close.open')}>
          <p className="py-3">{t('books.close.noneOpen')}</p>
        </Section>
      ) : null}
      {KINDS.map((kind) => {
        const rows = needed
          .filter((item) => item.kind === kind)
          .sort((a, b) => Number(a.carried !== null) - Number(b.carried !== null));
        const waiting = rows.filter(({ carried }) => carried === null).slice(0, MOST_AT_ONCE);
        return rows.length === 0 ? null : (
          <Section
            key={kind}
            title={t(`books.close.kind.${kind}`, { count: rows.length })}
            lead={t(`books.close.kind.${kind}.lead`)}
          >
            <ItemList rows={rows} timeZone={timeZone} {...decide} />
            {decide.onCarry && waiting.length > 1 ? (
              <Button className="mt-3" onClick={() => decide.onCarry?.(waiting)}>
                {t('books.close.carryAll', { count: waiting.length })}
              </Button>
            ) : null}
          </Section>
        );
      })}
      {notListed > 0 ? <p>{t('books.close.notListed', { count: notListed })}</p> : null}
      {explained.length > 0 ? (
        <div className="border-t border-rule">
          <Disclosure title={t('books.close.explained', { count: explained.length })}>
            <p className="max-w-prose pb-1 text-[0.9375rem] text-ink-soft">{t('books.close.explained.lead')}</p>
            <ItemList rows={explained} timeZone={timeZone} {...decide} />
          </Disclosure>
        </div>
      ) : null}
    </div>
  );
}

function ItemList({ rows, timeZone, ...decide }: { rows: readonly OpenItem[]; timeZone: string } & Decide) {
  return (
    <ul>
      {rows.map((item) => (
        <Item key={item.key} item={item} timeZone={timeZone} {...decide} />
      ))}
    </ul>
  );
}

function Item({ item, timeZone, onSettle, onCarry }: { item: OpenItem; timeZone: string } & Decide) {
  const t = useMessages();
  const format = useFormat();
  return (
    <li className="flex flex-wrap items-start justify-between gap-x-8 gap-y-1 border-b border-rule py-3">
      <div className="min-w-0 flex-1 basis-52 leading-snug">
        <p className="flex flex-wrap items-baseline gap-x-4">
          <Link to={itemPath(item)} className="inline-flex min-h-6 items-center font-[650] text-ink">
            {itemTitle(t, format, item)}
          </Link>
          {item.kind === 'difference' ? <Verdict verdict={item.difference.verdict} /> : null}
        </p>
        <p className="text-[0.9375rem] text-ink-soft">
          {itemDetail(t, format, item, timeZone)}
          {item.kind === 'difference' && item.difference.twoUG !== null
            ? ` ${t('books.scalesExplain', { mass: format.massAbout(item.difference.twoUG) })}`
            : null}
        </p>
        <Decision item={item} />
      </div>
      {onCarry ? (
        <div className="flex flex-wrap gap-x-6">
          {item.kind === 'difference' && onSettle ? (
            <Button kind="quiet" onClick={() => onSettle(item)}>
              {t('books.close.settle')} <span className="sr-only">{itemTitle(t, format, item)}</span>
            </Button>
          ) : null}
          <Button kind="quiet" onClick={() => onCarry([item])}>
            {item.carried ? t('books.close.carryAnew') : t('books.close.carry')}{' '}
            <span className="sr-only">{itemTitle(t, format, item)}</span>
          </Button>
        </div>
      ) : null}
    </li>
  );
}

/** By whom it is carried, or who carried it last month. */
function Decision({ item: { carried, carriedBefore, needsDecision } }: { item: OpenItem }) {
  const t = useMessages();
  const format = useFormat();
  if (carried) {
    return (
      <p className="border-l-4 border-rest pl-2.5 font-[600]">
        {t('books.close.carriedBy', { who: carried.name, reason: carried.reason })}
      </p>
    );
  }
  if (!carriedBefore || !needsDecision) return null;
  return (
    <p className="text-[0.9375rem]">
      {t('books.close.carriedBefore', {
        who: carriedBefore.name,
        month: format.month(carriedBefore.month),
        reason: carriedBefore.reason,
      })}
    </p>
  );
}
