import { useEffect, useState } from 'react';

export interface RefrigerantName {
  designation: string;
  safetyClass: string;
}

let known: readonly RefrigerantName[] | null = null;

/** Every refrigerant of the reference table, by designation; fetched once, when a page first needs the choice. */
export async function loadRefrigerantNames(): Promise<readonly RefrigerantName[]> {
  if (known) return known;
  const { default: table } = await import('../../data/refrigerants.json');
  known = table.rows.map(({ designation, safetyClass }) => ({ designation, safetyClass }));
  return known;
}

/** Empty until they have arrived. */
export function useRefrigerantNames(): readonly RefrigerantName[] {
  const [names, setNames] = useState(known ?? []);
  useEffect(() => {
    if (known) return;
    let current = true;
    loadRefrigerantNames().then(
      (loaded) => current && setNames(loaded),
      () => undefined, // without the network a choice stays as short as it is
    );
    return () => {
      current = false;
    };
  }, []);
  return names;
}
