import { useMemo } from 'react';
import { useFormat } from '../../lib/format.ts';

/** Money as the person's region writes it; an amount is decimal text, and its decimals are kept. */
export function useAmount(): (amount: string, currency: string) => string {
  const { locale } = useFormat();
  return useMemo(
    () => (amount, currency) =>
      new Intl.NumberFormat(locale, {
        style: 'currency',
        currency,
        maximumFractionDigits: Math.max(2, amount.split('.')[1]?.length ?? 0),
      }).format(Number(amount)),
    [locale],
  );
}
