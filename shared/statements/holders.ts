/** Somebody, or nobody, held a cylinder from a moment on. */
export interface HolderFrom {
  readonly personId: string | null;
  /** Milliseconds since 1970, UTC. */
  readonly from: number;
}

export interface HeldSpan extends HolderFrom {
  readonly to: number;
}

/**
 * Who held a cylinder between two readings, in order: a difference that they show is charged to these, not to whoever
 * found it. Before the first entry of the history nobody is known to have held it.
 *
 * @param after the reading before; null: nothing earlier is known
 * @param until the reading that shows the difference
 */
export function heldBetween(history: readonly HolderFrom[], after: number | null, until: number): HeldSpan[] {
  const inOrder = history.toSorted((a, b) => a.from - b.from);
  const spans = inOrder.map(({ personId, from }, index): HeldSpan => {
    const next = inOrder[index + 1]?.from ?? Number.POSITIVE_INFINITY;
    return { personId, from: Math.max(from, after ?? from), to: Math.min(next, until) };
  });
  const within = spans.filter(({ from, to }) => from < to);
  if (within.length > 0) return joined(within);
  // Two readings of one moment, or a history that begins later: whoever held it at the reading.
  const at = inOrder.findLast(({ from }) => from <= until);
  return at ? [{ personId: at.personId, from: after ?? until, to: until }] : [];
}

/** The same person twice in a row is one span. */
function joined(spans: readonly HeldSpan[]): HeldSpan[] {
  const list: HeldSpan[] = [];
  for (const span of spans) {
    const last = list.at(-1);
    if (last?.personId === span.personId) list[list.length - 1] = { ...last, to: span.to };
    else list.push(span);
  }
  return list;
}
