import { SCENARIOS } from '../../../shared/ledger/scenarios/all-scenarios.ts';
import type { ScenarioCase, SymbolicGroup } from '../../../shared/ledger/scenarios/scenario.ts';
import { emptyQuantity } from '../../ui/quantity-draft.ts';
import {
  type Answers,
  emptyAnswers,
  emptyRow,
  type FormContext,
  type KnownCylinder,
  type WeighedRow,
} from './answers.ts';

export function caseOf(id: string): ScenarioCase {
  const found = SCENARIOS.flatMap(({ cases }) => cases).find((each) => each.id === id);
  if (!found) throw new Error(`no case ${id}`);
  return found;
}

/** What was entered at a step, as the scenario writes it. */
export function groupAt(id: string, step: string): SymbolicGroup {
  const does = caseOf(id).steps.find((each) => each.step === step)?.does;
  if (does?.act === 'post') return does.group;
  if (does?.act === 'reverse' && does.replacement) return does.replacement;
  throw new Error(`${id} ${step} posts nothing`);
}

const TARE_G = 7_700;
let numbers = 0;
export const newId = (): string => {
  numbers += 1;
  return `id-${numbers}`;
};

/** Plain words for tests: the key and its values. */
export const say = (key: string, params: Record<string, string | number> = {}): string =>
  [key, ...Object.entries(params).map(([name, value]) => `${name}=${value}`)].join(' ');

/** What a form knows at the start of a case; `contents` says what a cylinder holds by the step in question. */
export function contextOf(
  id: string,
  { unit = 'U', contents = {} }: { unit?: string; contents?: Record<string, Record<string, number>> } = {},
): FormContext {
  const { start } = caseOf(id);
  const registered = start.units[unit];
  const known = registered && registered.initial.state !== 'notKnown' ? Number(registered.initial.massG) : null;
  return {
    locale: 'en-GB',
    jurisdiction: null,
    firmJurisdiction: null,
    today: '2026-03-05',
    machineMadeOn: null,
    purchase: null,
    instant: (local) => local,
    say,
    unit: registered
      ? ({
          id: unit,
          tag: unit,
          refrigerant: registered.refrigerant,
          customerId: 'customer',
          book: {
            known: known !== null,
            massG: known ?? 0,
            byRefrigerant: known === null ? [] : [{ refrigerant: registered.refrigerant, massG: known }],
          },
          fullCharge: null,
        } as FormContext['unit'])
      : null,
    cylinder: (symbol) => {
      const cylinder = start.cylinders[symbol];
      if (!cylinder) return undefined;
      const held = contents[symbol] ?? { [cylinder.refrigerant]: Number(cylinder.contentG ?? 0) };
      const byRefrigerant = Object.entries(held).map(([refrigerant, massG]) => ({ refrigerant, massG }));
      return {
        id: symbol,
        tag: symbol,
        kind: cylinder.nonRefillable ? 'nonRefillable' : symbol.startsWith('R') ? 'recovery' : 'refillable',
        refrigerant: cylinder.refrigerant,
        contentG: byRefrigerant.reduce((all, { massG }) => all + massG, 0),
        stampedLimitG: null,
        waterCapacityG: null,
        servicePressureKPaGauge: null,
        retestDue: null,
        tareG: TARE_G,
        tareTyped: { value: String(TARE_G), unit: 'g' },
        byRefrigerant,
        mixed: byRefrigerant.length > 1,
        owner: { kind: 'ours' },
        lastWeighedAt: null,
      } as KnownCylinder;
    },
  };
}

export const grams = (text: string, unit: 'g' | 'oz' | 'kg' | 'lb' = 'g') => ({ ...emptyQuantity<'mass'>(unit), text });
/** A cylinder that shows this much above its tare. */
export const weighed = (
  cylinderId: string,
  beforeNetG: number,
  afterNetG: number | null,
  over: Partial<WeighedRow> = {},
): WeighedRow => ({
  ...emptyRow(newId, 'g', cylinderId),
  toolId: 'scale',
  before: grams(String(beforeNetG + TARE_G)),
  after: grams(afterNetG === null ? '' : String(afterNetG + TARE_G)),
  ...over,
});

export function answersOf(over: Partial<Answers>): Answers {
  const empty = emptyAnswers({ newId, unit: 'g', now: { local: '', day: '' } }, 0);
  return { ...empty, unitId: 'U', ...over };
}

/** Without ids and without what is null or empty, which a request may write either way. */
export function comparable(body: object): unknown {
  const clean = (value: unknown): unknown => {
    if (Array.isArray(value)) return value.map(clean);
    if (value === null || typeof value !== 'object') return value;
    return Object.fromEntries(
      Object.entries(value)
        .filter(([, part]) => part !== null && part !== undefined && !(Array.isArray(part) && part.length === 0))
        .map(([name, part]) => [name, clean(part)]),
    );
  };
  const {
    groupId: _,
    schema: __,
    readings = [],
    entries = [],
    ...rest
  } = body as {
    groupId?: string;
    schema?: number;
    readings?: { id?: string }[];
    entries?: { id?: string }[];
  };
  return clean({
    ...rest,
    readings: (readings ?? []).map(({ id: _id, ...reading }) => reading),
    entries: (entries ?? []).map(({ id: _id, ...entry }) => entry),
  });
}
