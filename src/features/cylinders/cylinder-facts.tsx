import { useQuery } from '@tanstack/react-query';
import { allowedPressureKPaGauge } from '../../../shared/cylinder-fill/cylinder-limits.ts';
import { pressureRule } from '../../../shared/cylinder-fill/filling-table.ts';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { isRetestOverdue } from '../../../shared/cylinders/retest.ts';
import { formatQuantity } from '../../../shared/units/format-quantity.ts';
import { customerQueries } from '../../api/customers.ts';
import { partyQueries } from '../../api/parties.ts';
import { useSession } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Fact, Facts } from '../../ui/facts.tsx';
import { RentalFact } from './rental-facts.tsx';
import { type CylinderFigures, RATING_TEMP_C } from './use-cylinder-figures.ts';

/** What stands on the collar and what follows from it, each with its why. */
export function CylinderFacts({ cylinder, figures }: { cylinder: Cylinder; figures: CylinderFigures }) {
  const t = useMessages();
  const format = useFormat();
  const zone = useSession()?.firm.timeZone;
  return (
    <Facts>
      <Fact name={t('cylinders.refrigerant')}>
        {cylinder.refrigerant}, {t(`cylinders.state.${cylinder.contentState}`)}
        {cylinder.mixed ? (
          <ul className="pt-1 text-[0.9375rem]">
            {cylinder.byRefrigerant.map(({ refrigerant, massG }) => (
              <li key={refrigerant}>
                {refrigerant} {format.massAbout(massG)}
              </li>
            ))}
          </ul>
        ) : null}
      </Fact>
      <Fact name={t('cylinders.tare')}>
        {format.massAbout(cylinder.tareG)}
        <AsStamped typed={cylinder.tareTyped} massG={cylinder.tareG} />
      </Fact>
      <Fact name={t('cylinders.limit')}>
        <Limit cylinder={cylinder} figures={figures} />
      </Fact>
      <Fact name={t('cylinders.pressure')}>
        <Pressure cylinder={cylinder} figures={figures} />
      </Fact>
      <Fact name={t('cylinders.retest')}>
        {cylinder.retestDue === null ? t('cylinders.notGiven') : format.month(cylinder.retestDue.slice(0, 7))}
        {isRetestOverdue(cylinder.retestDue, toDayInput(deviceNow())) ? (
          <strong className="font-[650]">, {t('cylinders.mark.retestOverdue')}</strong>
        ) : null}
      </Fact>
      <Fact name={t('cylinders.holder')}>{cylinder.heldByName ?? t('cylinders.nobody')}</Fact>
      <Fact name={t('cylinders.owner')}>
        <Owner owner={cylinder.owner} />
      </Fact>
      <RentalFact cylinder={cylinder} />
      {cylinder.batch ? <Fact name={t('cylinders.batch')}>{cylinder.batch}</Fact> : null}
      <Fact name={t('cylinders.lastWeighed')}>
        {cylinder.lastWeighedAt === null || cylinder.lastReadingGrossG === null
          ? t('cylinders.neverWeighed')
          : t('cylinders.lastWeighedAt', {
              when: format.longDateTime(cylinder.lastWeighedAt, zone),
              gross: format.massAbout(cylinder.lastReadingGrossG),
            })}
      </Fact>
    </Facts>
  );
}

/** As stamped, where the person reads another unit. */
function AsStamped({ typed, massG }: { typed: { value: string; unit: string }; massG: number }) {
  const t = useMessages();
  const text = useFormat().massAsTyped(typed, massG);
  return text === null ? null : <Why>{t('cylinders.typedAs', { typed: text })}</Why>;
}

const Why = ({ children }: { children: React.ReactNode }) => (
  <span className="type-label block text-[0.9375rem] text-ink-soft">{children}</span>
);

function Limit({ cylinder, figures }: { cylinder: Cylinder; figures: CylinderFigures }) {
  const t = useMessages();
  const format = useFormat();
  const { limitG, waterCapacityG, kind } = cylinder;
  if (limitG === null) {
    return (
      <>
        {t('cylinders.limit.none')}
        <Why>{t(kind === 'nonRefillable' ? 'cylinders.limit.nonRefillable' : 'cylinders.limit.notKnown')}</Why>
      </>
    );
  }
  const { ruleLimitG, liquidDensityKgM3 } = figures;
  const byRule = cylinder.stampedLimitG === null;
  return (
    <>
      {t('cylinders.limit.net', { mass: format.massAbout(limitG), gross: format.massAbout(limitG + cylinder.tareG) })}
      <Why>
        {byRule && waterCapacityG !== null && liquidDensityKgM3 !== null
          ? t('cylinders.limit.byRule', {
              capacity: format.massAbout(waterCapacityG),
              density: format.number(liquidDensityKgM3, 0),
              refrigerant: figures.limitingRefrigerant,
            })
          : byRule
            ? t('cylinders.limit.rule')
            : ruleLimitG === null || Math.abs(ruleLimitG - limitG) < 0.01
              ? t('cylinders.limit.stamped')
              : t('cylinders.limit.stampedAgainstRule', { rule: format.massAbout(ruleLimitG) })}
      </Why>
      {figures.cautions.map(({ code, message }) => (
        <Why key={code}>{message}</Why>
      ))}
    </>
  );
}

function Pressure({ cylinder, figures }: { cylinder: Cylinder; figures: CylinderFigures }) {
  const t = useMessages();
  const shown = usePressure();
  const { servicePressureKPaGauge, pressureRatingHolds } = cylinder;
  const { pressureAt55KPaGauge: needed, hottest } = figures;
  const { jurisdiction } = useSession()?.firm ?? { jurisdiction: null };
  const { clause } = pressureRule(jurisdiction);
  return (
    <>
      {servicePressureKPaGauge === null ? t('cylinders.notGiven') : shown(servicePressureKPaGauge)}
      {pressureRatingHolds === null ? null : (
        <strong className="font-[650]">
          {', '}
          {t(pressureRatingHolds ? 'cylinders.pressure.holds' : 'cylinders.pressure.tooLow')}
        </strong>
      )}
      {needed === null ? null : (
        <Why>
          {t('cylinders.pressure.needs', {
            refrigerant: hottest,
            pressure: shown(needed),
            temperature: RATING_TEMP_C,
          })}
        </Why>
      )}
      {clause === null || servicePressureKPaGauge === null || pressureRatingHolds === null ? null : (
        <Why>
          {t('cylinders.pressure.allowed', {
            pressure: shown(allowedPressureKPaGauge(servicePressureKPaGauge, jurisdiction)),
            clause,
          })}
        </Why>
      )}
    </>
  );
}

/** A gauge pressure in the person's unit. */
export function usePressure(): (kPaGauge: number) => string {
  const { pressure, locale } = usePreferences();
  const unit = pressure === 'psig' ? 'psi' : pressure;
  return (kPaGauge) => formatQuantity('pressureGauge', kPaGauge, unit, { locale, decimals: unit === 'bar' ? 1 : 0 });
}

function Owner({ owner }: { owner: Cylinder['owner'] }) {
  const t = useMessages();
  const party = useQuery({
    ...partyQueries.one(owner.kind === 'party' ? owner.id : ''),
    enabled: owner.kind === 'party',
  });
  const customer = useQuery({
    ...customerQueries.one(owner.kind === 'customer' ? owner.id : ''),
    enabled: owner.kind === 'customer',
  });
  if (owner.kind === 'ours') return t('cylinders.owner.ours');
  if (owner.kind === 'party') return t('cylinders.owner.party', { name: party.data?.name ?? '' });
  return t('cylinders.owner.customer', { name: customer.data?.name ?? '' });
}
