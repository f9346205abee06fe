import type { ScaleReading } from './book-basis.ts';
import { type StepMass, type StepReading, scaleReading, type WeighedGroup } from './cylinder-issues.ts';
import type { EnteredGroup, JudgedReading } from './judged-group.ts';

/** A judged group as its readings and masses of one cylinder, in the form that a statement is made of too. */
export function weighedGroupOf(group: EnteredGroup, cylinderId: string): WeighedGroup {
  const readings = group.readings.filter((reading) => reading.cylinderId === cylinderId);
  const masses = group.masses.flatMap(({ from, to, massMicrograms, howKnown }): StepMass[] => {
    const goesIn = to.place === 'cylinder' && to.id === cylinderId;
    const goesOut = from.place === 'cylinder' && from.id === cylinderId;
    if (!goesIn && !goesOut) return [];
    const other = goesIn ? from : to;
    const elsewhere = group.readings.find((reading) => other.place === 'cylinder' && reading.cylinderId === other.id);
    const signed = goesIn ? massMicrograms : -massMicrograms;
    return [{ massMicrograms: signed, weighed: howKnown === 'weighed', otherScale: elsewhere?.scale ?? null }];
  });
  return {
    groupId: group.id,
    closesGroupId: group.closesGroupId ?? null,
    readings: readings.map((reading) => stepReadingOf(group, reading)),
    masses,
  };
}

export const stepReadingOf = (group: EnteredGroup, reading: JudgedReading): StepReading => ({
  // The same whether the group is judged as it arrives or replayed.
  id: `${group.id} ${reading.cylinderId} ${reading.moment} ${reading.grossMicrograms}`,
  at: reading.at ?? group.occurredAt,
  toolId: reading.toolId ?? null,
  scale: reading.scale,
  moment: reading.moment,
  mode: reading.mode,
  grossMicrograms: reading.grossMicrograms,
  hoseMicrograms: reading.hoseFullMicrograms,
});

/** Weigh-ins that nobody ever closes are not kept for good. */
const MOST_OPEN = 8;

export function openStartsAfter(
  before: Readonly<Record<string, ScaleReading>>,
  group: EnteredGroup,
  cylinderId: string,
): Record<string, ScaleReading> {
  const gross = group.readings.filter((reading) => reading.cylinderId === cylinderId && reading.mode === 'gross');
  const start = gross.find(({ moment }) => moment === 'before');
  const isClosed = gross.some(({ moment }) => moment === 'after');
  const open = Object.entries(before).filter(([groupId]) => groupId !== group.closesGroupId);
  if (start && !isClosed) open.push([group.id, scaleReading(stepReadingOf(group, start))]);
  return Object.fromEntries(open.slice(-MOST_OPEN));
}
