import type { CylinderState } from './cylinder-state.ts';
import { compareInTimeline, type TimelinePosition } from './judged-group.ts';
import type { UnitState } from './unit-state.ts';

/** Raised when a state's shape or the rules change: an older snapshot is then thrown away and replayed. */
export const SNAPSHOT_VERSION = 3;

export interface Snapshot {
  readonly version: number;
  readonly state: unknown;
}

/** A state as plain JSON. A mass is written `"12µg"`, so that it comes back as a whole number whatever its size. */
export function toSnapshot(state: CylinderState | UnitState): Snapshot {
  return { version: SNAPSHOT_VERSION, state: mapBigints(state) };
}

/** Null where the snapshot is of another version. */
export const cylinderFromSnapshot = (snapshot: Snapshot): CylinderState | null =>
  snapshot.version === SNAPSHOT_VERSION ? (mapTexts(snapshot.state) as CylinderState) : null;
export const unitFromSnapshot = (snapshot: Snapshot): UnitState | null =>
  snapshot.version === SNAPSHOT_VERSION ? (mapTexts(snapshot.state) as UnitState) : null;

/** May this group be judged on the state as it is, or does the timeline have to be replayed? */
export const isInOrder = (state: { lastPosition: TimelinePosition | null }, group: TimelinePosition): boolean =>
  state.lastPosition === null || compareInTimeline(state.lastPosition, group) < 0;

const WRITTEN = /^(-?\d+)µg$/;

function mapBigints(value: unknown): unknown {
  if (typeof value === 'bigint') return `${value}µg`;
  return mapInside(value, mapBigints);
}

function mapTexts(value: unknown): unknown {
  const written = typeof value === 'string' ? WRITTEN.exec(value) : null;
  return written?.[1] === undefined ? mapInside(value, mapTexts) : BigInt(written[1]);
}

function mapInside(value: unknown, map: (inner: unknown) => unknown): unknown {
  if (Array.isArray(value)) return value.map(map);
  if (value === null || typeof value !== 'object') return value;
  return Object.fromEntries(Object.entries(value).map(([name, inner]) => [name, map(inner)]));
}
