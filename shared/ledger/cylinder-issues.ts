import type { Issue, ScaleReading } from './book-basis.ts';
import { ASSUMED_SCALE, type Scale } from './scale.ts';

export interface StepReading {
  readonly id: string;
  /** Milliseconds since 1970, UTC. */
  readonly at: number;
  /** Null: nobody named the scale, and `ASSUMED_SCALE` stands for it. */
  readonly toolId: string | null;
  readonly scale: Scale | null;
  readonly moment: 'before' | 'after' | 'only';
  readonly mode: 'gross' | 'zeroed';
  readonly grossMicrograms: bigint;
  /** What the hose held, if it was full at this reading; else 0. */
  readonly hoseMicrograms: bigint;
}

export interface StepMass {
  /** Above zero: into the cylinder. */
  readonly massMicrograms: bigint;
  readonly weighed: boolean;
  /** The scale of the cylinder at the other end, if that was weighed in the group. */
  readonly otherScale: Scale | null;
}

/** A group's readings and masses of one cylinder. */
export interface WeighedGroup {
  readonly groupId: string;
  /** The weigh-in that it closes: its start reading belongs to these masses. */
  readonly closesGroupId: string | null;
  readonly readings: readonly StepReading[];
  readonly masses: readonly StepMass[];
}

const gramsOf = (mass: bigint): number => Number(mass) / 1e6;
const sizeG = (mass: bigint): number => Math.abs(gramsOf(mass));

export function scaleReading({ id, at, toolId, scale, grossMicrograms }: StepReading): ScaleReading {
  return {
    // One figure of one scale at one moment is one reading, also where two groups wrote it down.
    key: toolId === null ? id : `${toolId} ${at} ${grossMicrograms}`,
    scaleKey: toolId ?? 'not named',
    scale: scale ?? ASSUMED_SCALE,
    grossG: gramsOf(grossMicrograms),
  };
}

/** How each mass of the group is known. */
export function issuesOf(step: WeighedGroup, starts: ReadonlyMap<string, ScaleReading>): Issue[] {
  const gross = step.readings.filter(({ mode }) => mode === 'gross');
  const own = gross.find(({ moment }) => moment === 'before');
  const before = own ? scaleReading(own) : step.closesGroupId ? starts.get(step.closesGroupId) : undefined;
  const after = gross.find(({ moment }) => moment === 'after');
  const weighed = step.masses.filter((mass) => mass.weighed);
  const notWeighed = step.masses.filter((mass) => !mass.weighed).map((): Issue => ({ weighed: 'no' }));
  if (weighed.length === 0) return notWeighed;
  if (before && after) return [{ weighed: 'here', before, after: scaleReading(after) }, ...notWeighed];
  const zeroed = step.readings.find(({ mode }) => mode === 'zeroed')?.scale ?? gross[0]?.scale ?? null;
  return [
    ...weighed.map(
      ({ otherScale, massMicrograms }): Issue => ({
        weighed: 'elsewhere',
        scale: zeroed ?? otherScale ?? ASSUMED_SCALE,
        massG: sizeG(massMicrograms),
      }),
    ),
    ...notWeighed,
  ];
}
