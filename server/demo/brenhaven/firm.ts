import { type DemoFirm, euPreferences, lastingIds } from '../demo-firm.ts';

const nextId = lastingIds('Brenhaven Koudetechniek');
const firmId = nextId();

const person = (
  name: string,
  email: string,
  roles: DemoFirm['people'][number]['roles'],
  roleWords: string,
  more: { van: string | null; locale?: 'en-GB' | 'es-ES' },
) => ({
  id: nextId(),
  name,
  email: `${email}@brenhaven-koudetechniek.example`,
  roles,
  roleWords,
  van: more.van,
  preferences: euPreferences(more.locale ?? 'en-GB'),
});

/** Invented, as everything here. */
export const BK = {
  marijke: person('Marijke Oudeland', 'marijke', ['owner'], 'owner', { van: null }),
  sanne: person('Sanne Terhorst', 'sanne', ['technician'], 'technician', { van: 'Bus 1' }),
  inaki: person('Iñaki Valdoro', 'inaki', ['technician'], 'technician (Spanish)', { van: 'Bus 2', locale: 'es-ES' }),
};

export const brenhaven: DemoFirm = {
  firm: {
    id: firmId,
    name: 'Brenhaven Koudetechniek',
    jurisdiction: 'EU',
    timeZone: 'Europe/Amsterdam',
    locale: 'en-GB',
    gwpSet: 'EU-2024-573',
  },
  people: [BK.marijke, BK.sanne, BK.inaki],
};
