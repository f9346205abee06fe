import type { ReactNode } from 'react';
import type { PreviewedEntry } from '../../../shared/entry-previews/entry-preview.schema.ts';
import type { EntryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import type { PostedEntryResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import type { PlaceFields } from '../../../shared/ledger/place.ts';
import { microgramsOfTyped } from '../../../shared/units/mass.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { useWeighInData } from './weigh-in-data.ts';

/** From, arrow, to, and the mass at the right edge: as the log will have it. */
export function EntryLine({ from, to, mass, remark }: { from: string; to: string; mass: string; remark?: ReactNode }) {
  const t = useMessages();
  return (
    <li className="grid grid-cols-[minmax(0,1fr)_auto] items-baseline gap-x-4 border-b border-rule py-2">
      <span className="leading-snug">
        {from} <span className="text-move">{'\u2192'}</span>
        <span className="sr-only">{t('weighIn.entry.to')}</span> {to}
        {remark ? <span className="type-label block text-[0.9375rem] text-ink-soft">{remark}</span> : null}
      </span>
      <strong className="font-[680] whitespace-nowrap">{mass}</strong>
    </li>
  );
}

/** `cylinder 7741`, `unit 0412`, `atmosphere, from the hose`. */
export function usePlaceName(): (place: PlaceFields) => string {
  const t = useMessages();
  const { unit, cylinderOf } = useWeighInData();
  return ({ place, id, as }) => {
    if (place === 'unit') return t('weighIn.place.unit', { tag: unit.tag });
    if (place === 'cylinder') return t('weighIn.place.cylinder', { tag: cylinderOf(id ?? null)?.tag ?? '' });
    return t(as ? `weighIn.place.${place}.${as}` : `weighIn.place.${place}`);
  };
}

/**
 * The entries of these groups as they will be posted. What the books add is the server's answer where it has come, else
 * the differences that this device can tell.
 */
export function EntriesToCome({
  groups,
  gaps,
  added,
}: {
  groups: readonly EntryGroupRequest[];
  gaps: readonly Gap[];
  added?: readonly PreviewedEntry[] | null;
}) {
  const t = useMessages();
  const format = useFormat();
  const name = usePlaceName();
  return (
    <ul className="border-t border-rule">
      {added?.map((entry) => (
        <EntryLine
          key={entry.id}
          from={name(entry.from as PlaceFields)}
          to={name(entry.to as PlaceFields)}
          mass={format.mass(entry.massG)}
          remark={t('weighIn.entry.added')}
        />
      ))}
      {(added ? [] : gaps).map(({ cylinderId, gapG }) => {
        const cylinder = name({ place: 'cylinder', id: cylinderId });
        const difference = name({ place: 'cylinderDifference' });
        return (
          <EntryLine
            key={cylinderId}
            from={gapG < 0 ? cylinder : difference}
            to={gapG < 0 ? difference : cylinder}
            mass={format.mass(Math.abs(gapG))}
            remark={t('weighIn.entry.gap')}
          />
        );
      })}
      {groups.flatMap((group) => [
        ...(group.kind === 'vacuum' ? [<VacuumLine key={group.groupId} />] : []),
        ...(group.entries ?? []).map((entry) => (
          <EntryLine
            key={entry.id}
            from={name(entry.from)}
            to={name(entry.to)}
            mass={format.mass(Number(microgramsOfTyped(entry.mass)) / 1e6)}
            remark={t(`weighIn.howKnown.${entry.howKnown}`)}
          />
        )),
      ])}
    </ul>
  );
}

export interface Gap {
  cylinderId: string;
  /** Reading less book, in grams. */
  gapG: number;
}

function VacuumLine() {
  const t = useMessages();
  const { unit } = useWeighInData();
  return <li className="border-b border-rule py-2 leading-snug">{t('weighIn.entry.empty', { unit: unit.tag })}</li>;
}

/** The entries as the server posted them, with their numbers. */
export function PostedEntries({ entries }: { entries: readonly PostedEntryResponse[] }) {
  const t = useMessages();
  const format = useFormat();
  const name = usePlaceName();
  return (
    <ul className="border-t border-rule">
      {entries.map((entry) => (
        <EntryLine
          key={entry.id}
          from={name(entry.from)}
          to={name(entry.to)}
          mass={format.mass(entry.massG)}
          remark={t(entry.addedByServer ? 'weighIn.entry.numberAdded' : 'weighIn.entry.number', {
            number: format.number(entry.sequence),
          })}
        />
      ))}
    </ul>
  );
}
