import type { z } from 'zod';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import type { addLineSetRequest, LineSet } from '../../../shared/unit-register/unit.schema.ts';
import { readNumber } from '../../../shared/units/read-number.ts';
import { emptyQuantity, type QuantityDraft, quantityOf, quantityOfTyped } from '../../ui/quantity-draft.ts';
import { given, reader } from './unit-values.ts';

export interface BranchValues {
  name: string;
  parent: string;
  liquidOd: string;
  gasOd: string;
  length: QuantityDraft<'length'>;
  rise: QuantityDraft<'length'>;
  bends: string;
  equivalent: QuantityDraft<'length'>;
  reused: boolean;
  reuseChecked: boolean;
}

export interface LineSetValues {
  id: string;
  validFrom: string;
  branches: BranchValues[];
  note: string;
}

type Reads = Pick<Preferences, 'locale' | 'length'>;

export function emptyBranch(name: string, { length }: Reads): BranchValues {
  return {
    name,
    parent: '',
    liquidOd: '',
    gasOd: '',
    length: emptyQuantity(length),
    rise: emptyQuantity(length),
    bends: '',
    equivalent: emptyQuantity(length),
    reused: false,
    reuseChecked: false,
  };
}

/** A, B, C ... the first that no branch has. */
export function nextBranchName(branches: readonly { name: string }[]): string {
  for (let i = 0; ; i++) {
    const name = String.fromCharCode(65 + (i % 26)) + (i >= 26 ? String(Math.floor(i / 26)) : '');
    if (!branches.some((branch) => branch.name.trim() === name)) return name;
  }
}

/** The line set on record as a form holds it: a change begins with what is there. */
export function branchesOf(lineSet: LineSet | null, preferences: Reads): BranchValues[] {
  if (!lineSet) return [emptyBranch('A', preferences)];
  const { locale, length } = preferences;
  return lineSet.branches.map((branch) => ({
    name: branch.name,
    parent: branch.parent ?? '',
    liquidOd: String(branch.liquidOdMm),
    gasOd: branch.gasOdMm ? String(branch.gasOdMm) : '',
    length: branch.typedLength
      ? quantityOfTyped('length', branch.typedLength, locale)
      : quantityOf('length', branch.lengthM, length, locale),
    rise: branch.riseM ? quantityOf('length', branch.riseM, length, locale) : emptyQuantity(length),
    bends: branch.bends ? String(branch.bends) : '',
    equivalent: branch.equivalentMPerBend
      ? quantityOf('length', branch.equivalentMPerBend, length, locale)
      : emptyQuantity(length),
    reused: branch.reused,
    reuseChecked: branch.reuseChecked,
  }));
}

export function lineSetRequest(
  values: LineSetValues,
  {
    locale,
    instantOf,
    notWhole,
  }: {
    locale: string;
    instantOf: (local: string) => string | null;
    /** The sentence for a count that is no whole number. */
    notWhole: (typed: string) => string;
  },
): { request: z.input<typeof addLineSetRequest>; unreadable: (string | { field: string; message: string })[] } {
  const { read, unreadable: quantities } = reader<string>(locale);
  const counts: { field: string; message: string }[] = [];
  const branches = values.branches.map((branch, index) => {
    const at = `branches.${index}`;
    const length = read('length', branch.length, `${at}.length`);
    const bends = wholeOf(branch.bends);
    if (bends === null) counts.push({ field: `${at}.bends`, message: notWhole(branch.bends) });
    return {
      name: given(branch.name),
      parent: branch.parent || null,
      liquidOdMm: branch.liquidOd === '' ? (undefined as unknown as number) : Number(branch.liquidOd),
      gasOdMm: branch.gasOd === '' ? null : Number(branch.gasOd),
      lengthM: length === null ? (undefined as unknown as number) : metres(length.base),
      riseM: metres(read('length', branch.rise, `${at}.rise`, true)?.base ?? 0),
      bends: bends ?? 0,
      equivalentMPerBend: metres(read('length', branch.equivalent, `${at}.equivalent`)?.base ?? 0),
      typedLength: length && isKept(length.typed.unit) ? { value: length.typed.value, unit: length.typed.unit } : null,
      reused: branch.reused,
      reuseChecked: branch.reused && branch.reuseChecked,
    };
  });
  return {
    request: {
      id: values.id,
      validFrom: instantOf(values.validFrom) ?? '',
      branches,
      note: values.note.trim() || null,
    },
    unreadable: [...quantities, ...counts],
  };
}

/** Twelve figures: without the noise of feet turned into metres. */
const metres = (base: number) => Number(base.toPrecision(12));

/** Units in which a typed length is kept beside the metres. */
const isKept = (unit: string): unit is 'm' | 'ft' | 'in' => unit === 'm' || unit === 'ft' || unit === 'in';

/** An empty count is none; null for what is no whole number. */
function wholeOf(text: string): number | null {
  if (text.trim() === '') return 0;
  const number = readNumber(text);
  const value = number.is === 'number' ? Number(number.value) : Number.NaN;
  return Number.isInteger(value) && value >= 0 ? value : null;
}

export function lineSetPlaces({ branches }: LineSetValues): [string, string][] {
  return [
    ...branches.flatMap((_, index): [string, string][] =>
      (
        [
          ['name', 'name'],
          ['parent', 'parent'],
          ['liquidOdMm', 'liquidOd'],
          ['gasOdMm', 'gasOd'],
          ['lengthM', 'length'],
          ['riseM', 'rise'],
          ['bends', 'bends'],
          ['equivalentMPerBend', 'equivalent'],
        ] as const
      ).map(([place, field]) => [`/branches/${index}/${place}`, `branches.${index}.${field}`]),
    ),
    ['/validFrom', 'validFrom'],
    ['/note', 'note'],
  ];
}
