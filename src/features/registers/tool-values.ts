import type { z } from 'zod';
import type { Tool, toolKind } from '../../../shared/tools/tools.schema.ts';
import { emptyQuantity, type QuantityDraft, quantityOf, readQuantity } from '../../ui/quantity-draft.ts';

/** A tool as people type it. */
export interface ToolValues {
  id: string;
  kind: z.output<typeof toolKind>;
  name: string;
  serial: string;
  resolution: QuantityDraft<'mass'>;
  repeatability: QuantityDraft<'mass'>;
  /** In per cent, as data sheets write it. */
  spanPercent: string;
  offset: QuantityDraft<'mass'>;
  madeOn: string;
  lastCheckedOn: string;
  heldBy: string;
}

export const emptyTool = (id: string): ToolValues => ({
  id,
  kind: 'scale',
  name: '',
  serial: '',
  resolution: emptyQuantity('g'),
  repeatability: emptyQuantity('g'),
  spanPercent: '',
  offset: emptyQuantity('g'),
  madeOn: '',
  lastCheckedOn: '',
  heldBy: '',
});

export function valuesOfTool(tool: Tool, locale: string): ToolValues {
  const { scale } = tool;
  const mass = (massG: number | undefined): QuantityDraft<'mass'> =>
    massG ? quantityOf('mass', massG, 'g', locale) : emptyQuantity('g');
  return {
    id: tool.id,
    kind: tool.kind,
    name: tool.name,
    serial: tool.serial ?? '',
    resolution: mass(scale?.resolutionG),
    repeatability: mass(scale?.repeatabilityG),
    spanPercent: scale?.spanErrorRelative
      ? new Intl.NumberFormat(locale, { maximumFractionDigits: 6, useGrouping: false }).format(
          scale.spanErrorRelative * 100,
        )
      : '',
    offset: mass(scale?.offsetG),
    madeOn: tool.madeOn ?? '',
    lastCheckedOn: tool.lastCheckedOn ?? '',
    heldBy: tool.heldBy ?? '',
  };
}

type Field = 'resolution' | 'repeatability' | 'offset';

/** The request; a field that is no value leaves nothing valid behind, so that the schema names its place. */
export function toolRequest(values: ToolValues, locale: string, exists: boolean) {
  const unreadable: Field[] = [];
  const grams = (field: Field, absent: number | undefined) => {
    const reading = readQuantity('mass', values[field], { locale });
    if (reading.is === 'read') return reading.base;
    if (reading.is !== 'empty') unreadable.push(field);
    return absent;
  };
  const scale =
    values.kind === 'scale'
      ? {
          resolutionG: grams('resolution', undefined),
          repeatabilityG: grams('repeatability', 0),
          spanErrorRelative: relative(values.spanPercent),
          offsetG: grams('offset', 0),
        }
      : null;
  const facts = {
    name: values.name,
    serial: values.serial.trim() || null,
    ...(scale ? { scale } : {}),
    madeOn: values.madeOn || null,
    lastCheckedOn: values.lastCheckedOn || null,
    heldBy: values.heldBy || null,
  };
  return { request: exists ? facts : { id: values.id, kind: values.kind, ...facts }, unreadable };
}

/** `0,05` per cent is 0.0005; nothing is 0; what is no number is refused by the schema. */
export function relative(percent: string): number {
  const text = percent.trim().replace(/\s*%$/, '').replace(',', '.');
  if (text === '') return 0;
  return /^\d+(\.\d+)?$/.test(text) ? Number((Number(text) / 100).toPrecision(12)) : Number.NaN;
}
