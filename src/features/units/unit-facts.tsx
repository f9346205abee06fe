import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { formatQuantity } from '../../../shared/units/format-quantity.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Fact, Part } from './part.tsx';

/** Who and where, and what the nameplate says, or that it cannot be read. */
export function UnitFacts({ unit }: { unit: Unit }) {
  const t = useMessages();
  const format = useFormat();
  const { locale, pressure } = usePreferences();
  const gauge = (kPa: number) =>
    formatQuantity('pressureGauge', kPa, pressure === 'psig' ? 'psi' : pressure, {
      locale,
      decimals: pressure === 'bar' ? 1 : 0,
    });
  return (
    <Part title={t('units.facts')}>
      <dl>
        <Fact name={t('units.customer')}>{unit.customerName}</Fact>
        <Fact name={t('units.site')}>{unit.siteName}</Fact>
        <Fact name={t('units.applianceKind')}>
          {t(`units.applianceKind.${unit.applianceKind}`)}
          {unit.subsector ? `, ${t(`units.subsector.${unit.subsector}`)}` : ''}
        </Fact>
        <Fact name={t('units.refrigerant')}>
          {unit.refrigerant}
          {unit.co2eT === null ? '' : `, ${t('units.co2e', { mass: format.tonnes(unit.co2eT) })}`}
        </Fact>
        <Fact name={t('units.serials')}>
          {unit.serials.length === 0 ? (
            <span className="text-ink-soft">
              {t(unit.nameplateReadable ? 'units.none' : 'units.nameplateUnreadable')}
            </span>
          ) : (
            <ul>
              {unit.serials.map((serial) => (
                <li key={`${serial.part} ${serial.serial}`}>
                  <span className="font-mono text-[0.9375rem]">{serial.serial}</span>{' '}
                  <span className="text-ink-soft">
                    {t(`units.serial.${serial.part}`)}
                    {serial.model ? `, ${serial.model}` : ''}
                  </span>
                </li>
              ))}
              {unit.nameplateReadable ? null : <li className="text-ink-soft">{t('units.nameplateUnreadable')}</li>}
            </ul>
          )}
        </Fact>
        <Fact name={t('units.designPressure')}>
          {unit.designPressureHighKPaGauge === null && unit.designPressureLowKPaGauge === null ? (
            <span className="text-ink-soft">{t('units.notRecorded')}</span>
          ) : (
            [
              ...(unit.designPressureHighKPaGauge === null
                ? []
                : [t('units.designPressure.high', { pressure: gauge(unit.designPressureHighKPaGauge) })]),
              ...(unit.designPressureLowKPaGauge === null
                ? []
                : [t('units.designPressure.low', { pressure: gauge(unit.designPressureLowKPaGauge) })]),
            ].join(', ')
          )}
        </Fact>
        <Fact name={t('units.installedOn')}>
          {unit.installedOn ? (
            format.day(unit.installedOn)
          ) : (
            <span className="text-ink-soft">{t('units.notRecorded')}</span>
          )}
        </Fact>
      </dl>
    </Part>
  );
}
