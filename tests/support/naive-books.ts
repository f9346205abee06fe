/** An entry as an answer tells it. */
export interface ToldEntry {
  id: string;
  refrigerant: string;
  massG: number;
  from: ToldPlace;
  to: ToldPlace;
  bookingMonth: string;
}
export interface ToldPlace {
  place: string;
  id?: string | null;
  as?: string | null;
}

/**
 * Books as somebody keeps them on paper: each entry that an answer told is written down once, and everything else is a
 * plain sum. It knows nothing of judging, and shares no code with the server.
 */
export class NaiveBooks {
  private readonly entries = new Map<string, ToldEntry>();

  /** @throws Error when an entry was told before */
  write(told: readonly ToldEntry[]): void {
    for (const entry of told) {
      if (this.entries.has(entry.id)) throw new Error(`entry ${entry.id} was posted twice`);
      this.entries.set(entry.id, entry);
    }
  }

  count(): number {
    return this.entries.size;
  }

  /** `cylinder:<id> R-410A <micrograms>`, what is not nothing, in order. */
  balances(): string[] {
    const sums = new Map<string, bigint>();
    for (const { refrigerant, massG, from, to } of this.entries.values()) {
      add(sums, `${keyOf(to)} ${refrigerant}`, micrograms(massG));
      add(sums, `${keyOf(from)} ${refrigerant}`, -micrograms(massG));
    }
    return linesOf(sums);
  }

  /** By booking month, refrigerant and both kinds of place, with how many entries. */
  monthSums(): string[] {
    const sums = new Map<string, bigint>();
    const counts = new Map<string, number>();
    for (const { refrigerant, massG, from, to, bookingMonth } of this.entries.values()) {
      const key = [bookingMonth, refrigerant, kindOf(from), kindOf(to)].join(' ');
      add(sums, key, micrograms(massG));
      counts.set(key, (counts.get(key) ?? 0) + 1);
    }
    return [...sums].map(([key, mass]) => `${key} ${mass} ${counts.get(key)}`).sort();
  }

  /** All refrigerants of the places of one kind added up, in grams. */
  heldByKindG(kind: string): number {
    const all = [...this.entries.values()];
    const moved = all.map(({ massG, from, to }) => {
      const into = to.place === kind ? micrograms(massG) : 0n;
      return from.place === kind ? into - micrograms(massG) : into;
    });
    return Number(moved.reduce((sum, mass) => sum + mass, 0n)) / 1e6;
  }
}

const micrograms = (massG: number): bigint => BigInt(Math.round(massG * 1e6));
const kindOf = ({ place, as }: ToldPlace): string => (as ? `${place}:${as}` : place);
const keyOf = (place: ToldPlace): string => (place.id ? `${place.place}:${place.id}` : kindOf(place));
const add = (sums: Map<string, bigint>, key: string, mass: bigint): void => {
  sums.set(key, (sums.get(key) ?? 0n) + mass);
};
const linesOf = (sums: Map<string, bigint>): string[] =>
  [...sums].flatMap(([key, mass]) => (mass === 0n ? [] : [`${key} ${mass}`])).sort();
