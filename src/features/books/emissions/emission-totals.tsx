import type { EmissionsResponse } from '../../../../shared/books/emissions.schema.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Fact, Facts } from '../../../ui/facts.tsx';
import { Notice } from '../../../ui/notice.tsx';
import { bookMass } from '../book-words.ts';

/** All of it in one mass and one CO2 equivalent; what is only "at least" and what was lost before our care apart. */
export function EmissionTotals({ emissions: { total, gwpSet } }: { emissions: EmissionsResponse }) {
  const t = useMessages();
  const format = useFormat();
  const set = t(`books.gwpSet.${gwpSet.name}`);
  const tonnes = (co2eT: number | null) =>
    co2eT === null ? null : t('books.emissions.co2eBy', { mass: format.tonnes(co2eT), gwpSet: set });
  return (
    <section
      aria-label={t('books.emissions.total')}
      className="grid gap-x-12 gap-y-5 lg:grid-cols-[minmax(0,2fr)_minmax(0,3fr)]"
    >
      <div className="border-t border-rule pt-2">
        <p className="type-label text-ink-soft">{t('books.emissions.total')}</p>
        <p className="type-figure text-[clamp(2.25rem,9vw,3.25rem)]">{bookMass(format, total.totalG)}</p>
        <p className="pt-1 text-[1.125rem] font-[600]">{tonnes(total.co2eT)}</p>
        {total.atLeastG === 0 ? null : (
          <p className="pt-2 text-ink-soft">
            {t('books.emissions.atLeast', { mass: bookMass(format, total.atLeastG) })}
          </p>
        )}
      </div>
      <div className="flex flex-col gap-3">
        <Facts>
          <Fact name={t('books.emissions.measured')}>{bookMass(format, total.measuredG)}</Fact>
          <Fact name={t('books.emissions.inferred')}>{bookMass(format, total.inferredG)}</Fact>
          <Fact name={t('books.emissions.hose')}>{bookMass(format, total.hoseG)}</Fact>
          <Fact name={t('books.emissions.before')}>
            <span className="font-[600]">{bookMass(format, total.beforeOurCareG)}</span>{' '}
            {total.beforeOurCareG === 0 ? null : (
              <span className="text-ink-soft">
                {[t('books.emissions.before.apart'), tonnes(total.beforeOurCareCo2eT)].filter(Boolean).join(' ')}
              </span>
            )}
          </Fact>
        </Facts>
        {total.notCovered.length > 0 ? (
          <Notice
            title={t('books.emissions.notCovered', { refrigerants: format.list(total.notCovered), gwpSet: set })}
          />
        ) : null}
      </div>
    </section>
  );
}
