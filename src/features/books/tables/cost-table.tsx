import { useQuery } from '@tanstack/react-query';
import type { CostRow } from '../../../../shared/books/books.schema.ts';
import { type BooksPeriod, bookQueries } from '../../../api/books.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Failed, RowsSkeleton } from '../../../ui/notice.tsx';
import { money } from '../book-words.ts';

/** What the stock cost, what of it went where, and what it is worth at the end: by refrigerant, as an account. */
export function CostTable({ period }: { period: BooksPeriod }) {
  const t = useMessages();
  const query = useQuery(bookQueries.cost(period));
  if (query.isError) return <Failed error={query.error} onRetry={() => void query.refetch()} />;
  if (!query.data) return <RowsSkeleton rows={6} />;
  const { rows, currency } = query.data;
  if (rows.length === 0) return <p className="py-3">{t('books.table.cost.none')}</p>;
  return (
    <div className="grid gap-x-10 gap-y-8 pt-4 lg:grid-cols-2">
      {rows.map((row) => (
        <CostAccount key={row.refrigerant} row={row} currency={currency} />
      ))}
    </div>
  );
}

const LINES = [
  ['start', 1],
  ['bought', 1],
  ['otherIn', 1],
  ['intoUnits', -1],
  ['lost', -1],
  ['differences', -1],
  ['otherOut', -1],
  ['end', 1],
] as const;

/** One refrigerant: mass and cost side by side, each column adding up to its last line. */
function CostAccount({ row, currency }: { row: CostRow; currency: string }) {
  const t = useMessages();
  const format = useFormat();
  const { locale } = format;
  const perKg = (price: number | null) =>
    price === null ? t('books.cost.noPrice') : t('books.cost.perKg', { price: money(locale, price, currency) });
  const isPriced = row.startPerKg !== null || row.endPerKg !== null;
  return (
    <table className="w-full self-start text-[0.9375rem]">
      <caption className="pb-1 text-left">
        <span className="type-narrow text-[1.0625rem] font-[650]">{row.refrigerant}</span>
        <span className="block text-ink-soft">
          {t('books.cost.prices', { start: perKg(row.startPerKg), end: perKg(row.endPerKg) })}
        </span>
      </caption>
      <thead>
        <tr className="type-label text-[0.875rem] text-ink-soft">
          <th scope="col" className="border-b border-ink py-1 text-left font-[550]">
            {t('books.cost.line')}
          </th>
          <th scope="col" className="border-b border-ink py-1 text-right font-[550]">
            {t('books.col.mass')}, {format.massUnit}
          </th>
          <th scope="col" className="border-b border-ink py-1 pl-4 text-right font-[550]">
            {t('books.col.cost')}
          </th>
        </tr>
      </thead>
      <tbody>
        {LINES.filter(([name]) => name === 'end' || row[`${name}G`] !== 0).map(([name, sign]) => (
          <tr key={name} className={name === 'end' ? 'font-[650] [&>*]:border-t-2 [&>*]:border-ink' : ''}>
            <th
              scope="row"
              className={`border-b border-rule-faint py-1.5 text-left ${name === 'end' ? 'font-[650]' : 'font-[400]'}`}
            >
              {t(`books.cost.${name}`)}
              {name === 'bought' && row.withoutPriceG > 0 ? (
                <span className="block text-[0.875rem] text-ink-soft">
                  {t('books.cost.withoutPrice', { mass: format.mass(row.withoutPriceG) })}
                </span>
              ) : null}
            </th>
            <td className="border-b border-rule-faint py-1.5 text-right whitespace-nowrap">
              {format.massFigure(sign * row[`${name}G`])}
            </td>
            <td className="border-b border-rule-faint py-1.5 pl-4 text-right whitespace-nowrap">
              {isPriced ? money(locale, sign * row[`${name}Cost`], currency) : ''}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
