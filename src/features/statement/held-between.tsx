import { Link } from 'react-router-dom';
import type { CylinderStatement, Holder } from '../../../shared/statements/cylinder-statement.schema.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { signed } from './statement-figures.tsx';
import { Verdict } from './verdict.tsx';

type Difference = CylinderStatement['differences'][number];

/** Each difference of the period, the two readings that show it, and in whose hands the cylinder was between them. */
export function HeldBetween({ statement }: { statement: CylinderStatement }) {
  const t = useMessages();
  const format = useFormat();
  const { differences, timeZone } = statement;
  if (differences.length === 0) return null;
  return (
    <section aria-labelledby="held-between">
      <h2 id="held-between" className="type-narrow border-b-2 border-ink pb-1.5 text-[1.1875rem] font-[650]">
        {t('statement.heldBetween')}
      </h2>
      <ul>
        {differences.map((difference) => (
          <li
            key={`${difference.groupId} ${difference.at}`}
            className="grid gap-x-6 gap-y-1 border-b border-rule py-3 desk:grid-cols-[minmax(0,15rem)_minmax(0,1fr)] print:grid-cols-[13rem_minmax(0,1fr)]"
          >
            <p className="flex flex-wrap items-baseline gap-x-3">
              <Link to={`/log/${difference.groupId}`} className="text-[1.1875rem] font-[680] text-ink">
                {signed(format, difference.differenceG)}
              </Link>
              <Verdict verdict={difference.verdict} />
            </p>
            <p className="leading-snug">
              {between(t, format, difference, timeZone)}{' '}
              <span className="text-ink-soft">
                {t('statement.limit', { mass: format.massAbout(difference.twoUG) })}
              </span>
              <span className="block font-[600]">{hands(t, format, difference.heldBetween, timeZone)}</span>
            </p>
          </li>
        ))}
      </ul>
    </section>
  );
}

function between(t: Translate, format: Formats, { previousAt, at, bookG, scaleG }: Difference, zone: string): string {
  const figures = {
    when: format.dateTime(at, zone),
    book: format.mass(bookG),
    scale: format.mass(scaleG),
  };
  return previousAt
    ? t('statement.between', { ...figures, since: format.dateTime(previousAt, zone) })
    : t('statement.firstReading', figures);
}

/** `held by S. Brandt, van 3`; several with the time since which each had it. */
export function hands(t: Translate, format: Formats, held: readonly Holder[], zone: string): string {
  if (held.length === 0) return t('statement.hands.notKnown');
  const named = held.map(({ name, van, from }) => {
    const who = name === null ? t('statement.hands.nobody') : [name, van].filter(Boolean).join(', ');
    return held.length === 1 ? who : t('statement.hands.since', { who, when: format.dateTime(from, zone) });
  });
  return t('statement.hands', { who: named.join('; ') });
}
