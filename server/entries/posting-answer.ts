import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import type { FlagCode } from '../../shared/ledger/flag.ts';
import type { PlaceFields } from '../../shared/ledger/place.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { messageFor } from '../messages/translate.ts';

/** What a posting has made of the log, as it stood right after it: the same however often it is asked. */
export interface PostingOutcome {
  entries: OutcomeEntry[];
  balances: { place: 'cylinder' | 'unit'; id: string; refrigerant: string; mass: string }[];
  flags: OutcomeFlag[];
  groups: { id: string; deviceSkewSeconds: number | null }[];
  /** Tags of the cylinders and units, names of the reclaimers. */
  labels: Record<string, string>;
}

export interface OutcomeEntry {
  id: string;
  groupId: string;
  sequence: number;
  refrigerant: string;
  mass: string;
  from: PlaceFields;
  to: PlaceFields;
  howKnown: string | null;
  occurredAt: string;
  recordedAt: string;
  bookingMonth: string;
  late: boolean;
  addedByServer: boolean;
  atLeast: boolean;
  correctsGroupId: string | null;
}

export interface OutcomeFlag {
  code: FlagCode;
  place: 'cylinder' | 'unit' | 'reclaimer';
  subjectId: string;
  groupId: string;
  refrigerant: string | null;
  mass: string | null;
  figures: Record<string, string>;
  openedBy: string;
  closedBy: string | null;
}

/** Over two minutes a device's clock is marked. */
const MARKED_SKEW_SECONDS = 120;

export function presentOutcome(outcome: PostingOutcome, locale: Locale): EntryGroupResponse {
  const notKnown = new Set(
    outcome.flags
      .filter(({ code, closedBy }) => code === 'bookNotKnown' && closedBy === null)
      .map(({ subjectId }) => subjectId),
  );
  return {
    entries: outcome.entries.map(({ mass, from, to, occurredAt, recordedAt, ...entry }) => ({
      ...entry,
      massG: grams(mass),
      from: place(from),
      to: place(to),
      occurredAt: utc(occurredAt),
      recordedAt: utc(recordedAt),
    })),
    balances: outcome.balances.map(({ place: kind, id, refrigerant, mass }) => ({
      place: { place: kind, id },
      refrigerant,
      massG: grams(mass),
      known: !notKnown.has(id),
    })),
    flags: outcome.flags.map((flag) => ({
      code: flag.code,
      subject: { place: flag.place, id: flag.subjectId },
      groupId: flag.groupId,
      refrigerant: flag.refrigerant,
      massG: flag.mass === null ? null : grams(flag.mass),
      message: flagMessage(flag, outcome.labels[flag.subjectId] ?? '', locale),
      openedBy: flag.openedBy,
      closedBy: flag.closedBy,
    })),
    warnings: warningsOf(outcome, locale),
  };
}

/** What a flag says, in grams; the sign of a difference is in the words. Screens say it anew in the person's unit. */
export function flagMessage(
  flag: Pick<OutcomeFlag, 'code' | 'mass' | 'refrigerant' | 'figures'>,
  label: string,
  locale: Locale,
): string {
  const number = new Intl.NumberFormat(locale, { maximumFractionDigits: 1 });
  const masses = Object.entries(flagMassesG(flag)).map(([name, massG]) => [name, `${number.format(massG)}\u00A0g`]);
  return messageFor(`flag.${flag.code}`, locale, {
    place: label,
    refrigerant: flag.refrigerant ?? '',
    ...Object.fromEntries(masses),
  });
}

/** The masses of a flag's sentence by the names that the catalogue gives them: `mass`, `limit`, `fullCharge`. Grams. */
export function flagMassesG({ mass, figures }: Pick<OutcomeFlag, 'mass' | 'figures'>): Record<string, number> {
  const named = Object.entries(figures).map(([name, figure]) => [name.replace(/Micrograms$/, ''), grams(figure)]);
  return { ...(mass === null ? {} : { mass: Math.abs(grams(mass)) }), ...Object.fromEntries(named) };
}

function warningsOf({ groups, entries }: PostingOutcome, locale: Locale): EntryGroupResponse['warnings'] {
  const warnings: EntryGroupResponse['warnings'] = [];
  const skew = groups.find(({ deviceSkewSeconds }) => Math.abs(deviceSkewSeconds ?? 0) > MARKED_SKEW_SECONDS);
  if (skew) {
    const minutes = Math.round(Math.abs(skew.deviceSkewSeconds ?? 0) / 60);
    warnings.push({ code: 'deviceClockOff', message: messageFor('warning.deviceClockOff', locale, { minutes }) });
  }
  const late = entries.find((entry) => entry.late);
  if (late) {
    const month = late.bookingMonth;
    warnings.push({ code: 'bookedLate', message: messageFor('warning.bookedLate', locale, { month }) });
  }
  return warnings;
}

const grams = (mass: string): number => gramsOfMicrograms(BigInt(mass));
const utc = (instant: string): string => new Date(instant).toISOString();
const place = ({ place: kind, id, as }: PlaceFields): PlaceFields => ({
  place: kind,
  ...(id ? { id } : {}),
  ...(as ? { as } : {}),
});
