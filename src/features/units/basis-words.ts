import type { ChargeBasis } from '../../../shared/charge/charge.schema.ts';
import type { Formats } from '../../lib/format.ts';
import type { Translate } from '../../lib/messages.ts';

/** A charge basis as lines of words: name and text, only what the manual says. */
export function basisWords(basis: ChargeBasis, t: Translate, format: Formats): { name: string; text: string }[] {
  const lines = [
    { name: t('units.basis.factory'), text: format.mass(basis.factoryChargeG) },
    ...(basis.precharge
      ? [{ name: t('units.basis.precharge'), text: prechargeWords(basis.precharge, t, format) }]
      : []),
    { name: t('units.basis.rate'), text: rateWords(basis.rate, t, format) },
  ];
  const allowances = (basis.allowances ?? []).map(({ label, gEach, count, factor }) =>
    t('units.basis.allowance', {
      label,
      mass: format.mass(gEach),
      times: format.number(count * (factor ?? 1)),
    }),
  );
  if (allowances.length > 0) lines.push({ name: t('units.basis.allowances'), text: allowances.join(', ') });
  const limits = limitWords(basis.limits, t, format);
  if (limits.length > 0) lines.push({ name: t('units.basis.limits'), text: limits.join(', ') });
  if (basis.rounding) {
    lines.push({
      name: t('units.basis.rounding'),
      text: t(`units.basis.rounding.${basis.rounding.direction}`, { mass: format.mass(basis.rounding.toG) }),
    });
  }
  if (basis.shortLine === 'remove')
    lines.push({ name: t('units.basis.shortLine'), text: t('units.basis.shortLine.remove') });
  return lines;
}

function prechargeWords(precharge: NonNullable<ChargeBasis['precharge']>, t: Translate, format: Formats): string {
  if (precharge.scope === 'mass') return t('units.basis.scope.mass', { mass: format.mass(precharge.massG) });
  return t(`units.basis.scope.${precharge.scope}`, { length: format.length(precharge.lengthM) });
}

function rateWords(rate: ChargeBasis['rate'], t: Translate, format: Formats): string {
  switch (rate.kind) {
    case 'flat':
      return format.rate(rate.gPerM);
    case 'byLiquidPipe':
      return rate.sizes
        .map(({ liquidOdMm, gPerM }) =>
          t('units.basis.rate.size', { size: format.number(liquidOdMm, 2), rate: format.rate(gPerM) }),
        )
        .join(', ');
    case 'stepped':
      return rate.steps
        .map(({ upToM, extraG }) =>
          t('units.basis.rate.step', { length: format.length(upToM), mass: format.mass(extraG) }),
        )
        .join(', ');
    case 'formula':
      return rate.expression;
    case 'fixedMass':
      return t('units.basis.rate.fixed', { mass: format.mass(rate.extraG) });
  }
}

function limitWords(limits: ChargeBasis['limits'], t: Translate, format: Formats): string[] {
  if (!limits) return [];
  const { maxTotalChargeG, ...lengths } = limits;
  return [
    ...Object.entries(lengths).flatMap(([name, lengthM]) =>
      typeof lengthM === 'number' ? [t(`units.basis.limit.${name}`, { length: format.length(lengthM) })] : [],
    ),
    ...(typeof maxTotalChargeG === 'number'
      ? [t('units.basis.limit.maxTotalChargeG', { mass: format.mass(maxTotalChargeG) })]
      : []),
  ];
}
