import { at, group, mass, readings } from './build.ts';

/** The install of a unit of 1,250 from the factory: extra 90 weighed in from C1 (9,500 to 9,410). */
export const installHistory = group('install', 'extraCharge', at(1, '07:00'), {
  unitId: 'U',
  readings: readings('C1', '9500', '9410'),
  entries: [mass('C1 -> U', '90')],
});
