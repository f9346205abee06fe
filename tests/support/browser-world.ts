import { v7 as uuid } from 'uuid';
import type { TestApp } from './app.ts';
import { SINCE, startLedger, TARE_G } from './ledger.ts';

/** What cylinder 7741 holds at the start: it reads 17,105 g on the scale while 28 g stand in the hose. */
export const CONTENT_G = 17_105 + 28 - TARE_G;

/**
 * A firm for a walk through the screens: a technician and a compliance manager, unit 0412 with R-32 from the factory
 * (1,200 g, 7.5 m pre-charged, 20 g/m, up to 25 m), its line set not recorded yet, and cylinder 7741 on the van.
 */
export async function startWorld(app: TestApp, locale: 'en-GB' | 'es-ES' = 'en-GB') {
  const ledger = await startLedger(app, { jurisdiction: 'EU', locale, gwpSet: 'EU-2024-573' });
  const inFirm = { firmId: ledger.firm.id };
  const technician = await app.addPerson(['technician'], { ...inFirm, name: 'M. Oduya' });
  const manager = await app.addPerson(['complianceManager'], { ...inFirm, name: 'S. Brandt' });
  const unit = await ledger.unit('1200', '1200', { refrigerant: 'R-32', tag: '0412' }, 'factory');
  await ledger.made(`/units/${unit.id}/charge-bases`, {
    id: uuid(),
    validFrom: SINCE,
    basis: {
      refrigerant: 'R-32',
      factoryChargeG: 1200,
      precharge: { scope: 'system', lengthM: 7.5 },
      rate: { kind: 'flat', gPerM: 20 },
      limits: { maxLengthM: 25 },
      rounding: { toG: 1, direction: 'nearest' },
    },
    manual: { document: 'Installation manual', page: '14' },
  });
  const cylinder = await ledger.cylinder(String(CONTENT_G), {
    refrigerant: 'R-32',
    tag: '7741',
    heldBy: technician.id,
    waterCapacity: { value: '13', unit: 'kg' },
    servicePressureKPaGauge: 4_800,
  });
  return { app, ledger, technician, manager, unit, cylinder };
}
export type World = Awaited<ReturnType<typeof startWorld>>;
