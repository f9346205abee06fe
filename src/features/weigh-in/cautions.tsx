import { useMessages } from '../../lib/messages.ts';
import { Caution, type Signal } from '../../ui/caution.tsx';
import { hazardsOf } from './refrigerant-facts.ts';

interface Said {
  signal: Signal;
  key: string;
}

/** What this moment of the work is dangerous for, and no more: at the start what burns and freezes, while charging how. */
function cautionsAt(at: 'start' | 'charging' | 'end', refrigerant: string): Said[] {
  const { flammability, blend } = hazardsOf(refrigerant);
  const burns: Said[] =
    flammability === 'none'
      ? []
      : [{ signal: flammability === 'highlyFlammable' ? 'danger' : 'warning', key: `weighIn.caution.${flammability}` }];
  switch (at) {
    case 'start':
      return [...burns, { signal: 'caution', key: 'weighIn.caution.frostbite' }];
    case 'charging':
      return [
        {
          signal: 'caution',
          key: blend ? 'weighIn.caution.liquidBlend' : 'weighIn.caution.liquid',
        },
      ];
    case 'end':
      return burns;
  }
}

export function Cautions({ refrigerant, at }: { refrigerant: string; at: 'start' | 'charging' | 'end' }) {
  const t = useMessages();
  const { safetyClass } = hazardsOf(refrigerant);
  return cautionsAt(at, refrigerant).map(({ signal, key }) => (
    <Caution key={key} signal={signal}>
      {t(key, { refrigerant, safetyClass })}
    </Caution>
  ));
}
