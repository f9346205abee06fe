/** A label that belongs to one point of the beam. */
export interface LabelWish {
  key: string;
  /** The point it speaks of, in px from the left. */
  at: number;
  /** Its width in px. */
  width: number;
  /** Larger is placed first and dropped last. */
  weight: number;
}

export interface PlacedLabel {
  key: string;
  at: number;
  /** Left edge in px. */
  x: number;
  width: number;
  /** 0 is nearest to the beam. */
  row: number;
}

export interface Space {
  /** Labels stay between 0 and this. */
  width: number;
  /** Least distance between two labels of a row, and between a label and a stem that passes it. */
  gap: number;
  rows: number;
  /** A line leads from each point to its label, through the rows below; without, only labels can meet. */
  stems: boolean;
}

/** Bound on the search; six labels on three rows need a few dozen tries. */
const MOST_TRIES = 4000;

/**
 * Finds room for labels on a few rows so that none meets another, none is crossed by another's stem, and all stay inside.
 * Where not all fit, those of least weight are left out (their figures stand in the text beside the drawing).
 */
export function placeLabels(wishes: readonly LabelWish[], space: Space): PlacedLabel[] {
  const fitting = wishes.filter((wish) => wish.width <= space.width);
  const ranked = [...fitting].sort((a, b) => b.weight - a.weight || a.at - b.at);
  for (let kept = ranked.length; kept > 0; kept--) {
    const chosen = ranked.slice(0, kept);
    for (let rows = 1; rows <= space.rows; rows++) {
      const placed = search(chosen, { ...space, rows });
      if (placed) return placed;
    }
  }
  return [];
}

function search(wishes: readonly LabelWish[], space: Space): PlacedLabel[] | null {
  const placed: PlacedLabel[] = [];
  let tries = 0;
  const place = (index: number): boolean => {
    const wish = wishes[index];
    if (!wish) return true;
    for (const candidate of candidates(wish, space)) {
      if (++tries > MOST_TRIES) return false;
      if (placed.some((other) => meets(candidate, other, space))) continue;
      placed.push(candidate);
      if (place(index + 1)) return true;
      placed.pop();
    }
    return false;
  };
  return place(0) ? placed : null;
}

/** Low rows first; over its point, then as a flag to the right or to the left of its stem. */
function* candidates(wish: LabelWish, space: Space): Generator<PlacedLabel> {
  const inside = (x: number) => Math.min(Math.max(x, 0), space.width - wish.width);
  const centred = inside(wish.at - wish.width / 2);
  for (let row = 0; row < space.rows; row++) {
    const tried = new Set<number>();
    const beside = space.gap / 2 + 1;
    for (const x of [
      centred,
      inside(wish.at - 1),
      inside(wish.at - wish.width + 1),
      // Beside its own stem, so that a stem from a higher row at the same point passes it.
      wish.at + beside,
      wish.at - wish.width - beside,
    ]) {
      if (tried.has(x) || x < 0 || x + wish.width > space.width) continue;
      tried.add(x);
      yield { key: wish.key, at: wish.at, x, width: wish.width, row };
    }
  }
}

/** Whether two labels, or one and the stem of the other, come closer than the gap. */
export function meets(a: PlacedLabel, b: PlacedLabel, { gap, stems }: Pick<Space, 'gap' | 'stems'>): boolean {
  if (a.row === b.row) return a.x < b.x + b.width + gap && b.x < a.x + a.width + gap;
  if (!stems) return false;
  const [upper, lower] = a.row > b.row ? [a, b] : [b, a];
  // A stem that runs on from the lower label's own point is no crossing if it keeps clear of the text.
  return upper.at > lower.x - gap / 2 && upper.at < lower.x + lower.width + gap / 2;
}
