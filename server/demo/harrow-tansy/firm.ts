import { type DemoFirm, lastingIds, usPreferences } from '../demo-firm.ts';

const nextId = lastingIds('Harrow & Tansy Climate');

const firm: DemoFirm['firm'] = {
  id: nextId(),
  name: 'Harrow & Tansy Climate',
  jurisdiction: 'US',
  timeZone: 'America/New_York',
  locale: 'en-US',
  gwpSet: 'US-AIM',
};

type Row = [
  key: string,
  name: string,
  email: string,
  roles: DemoFirm['people'][number]['roles'],
  roleWords: string,
  van: string | null,
];
const person = ([key, name, email, roles, roleWords, van]: Row) => ({
  id: nextId(),
  name,
  email: email.includes('@') ? email : `${email}@harrow-tansy.example`,
  roles,
  roleWords,
  van,
  preferences: usPreferences(key === 'pia' ? 'es-US' : 'en-US'),
});

/** Invented, as everything here. */
export const HT = {
  merrin: person(['merrin', 'Merrin Tansy', 'merrin', ['owner'], 'owner', null]),
  ilse: person(['ilse', 'Ilse Varnholt', 'ilse', ['complianceManager'], 'compliance manager', null]),
  calder: person([
    'calder',
    'Calder Oswin',
    'calder',
    ['complianceManager', 'technician'],
    'manager, technician',
    null,
  ]),
  dov: person(['dov', 'Dov Larkspur', 'dov', ['technician'], 'technician', 'Van 1']),
  pia: person(['pia', 'Pía Robledal', 'pia', ['technician'], 'technician (Spanish)', 'Van 2']),
  bram: person(['bram', 'Bram Ostley', 'bram', ['technician'], 'technician', 'Van 3']),
  junia: person(['junia', 'Junia Thorngate', 'junia', ['technician'], 'technician', 'Van 4']),
  teo: person(['teo', 'Teo Quillard', 'teo', ['technician'], 'technician (apprentice)', 'Van 1']),
  corliss: person([
    'corliss',
    'Corliss Penwright',
    'facilities@town-of-wexcombe.example',
    ['reader'],
    'customer, reads the town’s sites',
    null,
  ]),
};
export type HtKey = keyof typeof HT;

export const harrowTansy: DemoFirm = {
  firm,
  people: [HT.merrin, HT.ilse, HT.calder, HT.dov, HT.pia, HT.bram, HT.junia, HT.teo, HT.corliss],
};
