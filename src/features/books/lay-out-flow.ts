import { ticks } from 'd3-array';
import { area, curveBumpX } from 'd3-shape';
import type { FlowPart } from './flow-parts.ts';

export interface FlowSpace {
  /** Of the place, px. */
  width: number;
  /** For the words at each side, px. */
  labelWidths: { left: number; right: number };
  /** That each pair of words needs, px. */
  labelHeight: number;
  /** Height of the beam, px. */
  beamHeight: number;
  /** The strip in the middle where the beam stands, with room for its figures, px. */
  beamWidth: number;
  /** How many figures stand on the beam, about. */
  figures: number;
}

export interface LaidRibbon {
  side: 'left' | 'right';
  part: FlowPart;
  /** The ribbon as an SVG path. */
  path: string;
  /** Its end at the words. */
  outer: { x: number; y: number; height: number };
  /** Where its words stand: the middle of the outer end. */
  labelY: number;
}

export interface LaidFlow {
  width: number;
  height: number;
  ribbons: LaidRibbon[];
  beam: { x: number; left: number; right: number; top: number; bottom: number };
  /** Round values up the beam, in the unit that was asked for; every fifth or so bears its figure. */
  ticks: { y: number; value: number; major: boolean }[];
}

/** Least distance between two outer ends, px. */
const GAP = 6;
/** Thinner than this nobody sees a ribbon, px. */
const THINNEST = { rest: 1.5, move: 1.5, gone: 3, open: 2.5 } as const;
/** Between a ribbon's end and its words, px. */
const WORDS_GAP = 10;

interface End {
  part: FlowPart;
  /** Outer end. */
  y: number;
  height: number;
  /** Along the beam, from its top. */
  innerY: number;
}

/**
 * Lays out the flows of a period: what was there and came in at the left, the beam that weighs it in the middle, what
 * went out and is there at the right. Widths of all ribbons are to one scale; outer ends stand so far apart that each
 * has room for its words beside it, so that no leader is needed and no words meet.
 * @param unitG grams to one unit of the beam's figures
 */
export function layOutFlow(
  { left, right }: { left: readonly FlowPart[]; right: readonly FlowPart[] },
  unitG: number,
  space: FlowSpace,
): LaidFlow {
  const { width, labelWidths, labelHeight, beamHeight, beamWidth } = space;
  const totalG = Math.max(sumOf(left), sumOf(right));
  const pxPerG = totalG > 0 ? beamHeight / totalG : 0;
  const stacks = { left: stackOf(left, pxPerG, labelHeight), right: stackOf(right, pxPerG, labelHeight) };
  const height = Math.max(beamHeight, stacks.left.height, stacks.right.height);
  const top = (height - beamHeight) / 2;
  // Between the words, not between the edges: both sides have the same way to the beam.
  const middle = (width + labelWidths.left - labelWidths.right) / 2;
  const beam = {
    x: middle,
    left: middle - beamWidth / 2,
    right: middle + beamWidth / 2,
    top,
    bottom: top + beamHeight,
  };
  const ribbonsOf = (side: 'left' | 'right'): LaidRibbon[] => {
    const { ends, height: stackHeight } = stacks[side];
    const outerX = side === 'left' ? labelWidths.left + WORDS_GAP : width - labelWidths.right - WORDS_GAP;
    const innerX = beam[side];
    const offset = (height - stackHeight) / 2;
    return ends.map(({ part, y, height: thick, innerY }) => {
      const outerY = offset + y;
      return {
        side,
        part,
        path: ribbonPath(outerX, outerY, innerX, top + innerY, thick),
        outer: { x: outerX, y: outerY, height: thick },
        labelY: outerY + thick / 2,
      };
    });
  };
  return {
    width,
    height,
    beam,
    ribbons: [...ribbonsOf('left'), ...ribbonsOf('right')],
    ticks: ticksOf(totalG / unitG, beam, space.figures),
  };
}

const sumOf = (parts: readonly FlowPart[]): number => parts.reduce((sum, { massG }) => sum + massG, 0);

/** Outer ends from the top, as far apart as ribbons and words need; the words of the first and last stay inside. */
function stackOf(parts: readonly FlowPart[], pxPerG: number, labelHeight: number): { ends: End[]; height: number } {
  const ends: End[] = [];
  let innerY = 0;
  let below = 0;
  for (const part of parts) {
    const height = Math.max(part.massG * pxPerG, THINNEST[part.kind]);
    const before = ends.at(-1);
    const apart = before
      ? Math.max((before.height + height) / 2 + GAP, labelHeight)
      : Math.max(height, labelHeight) / 2;
    const centre = before ? before.y + before.height / 2 + apart : apart;
    ends.push({ part, y: centre - height / 2, height, innerY });
    innerY += part.massG * pxPerG;
    below = centre + Math.max(height, labelHeight) / 2;
  }
  return { ends, height: below };
}

/** A band of one thickness that leaves both ends level. */
function ribbonPath(outerX: number, outerY: number, innerX: number, innerY: number, thick: number): string {
  const shape = area<{ x: number; y: number }>()
    .x(({ x }) => x)
    .y0(({ y }) => y)
    .y1(({ y }) => y + thick)
    .curve(curveBumpX)
    .digits(2);
  return (
    shape([
      { x: outerX, y: outerY },
      { x: innerX, y: innerY },
    ]) ?? ''
  );
}

/** Zero stands at the foot of the beam. */
function ticksOf(total: number, { top, bottom }: LaidFlow['beam'], figures: number): LaidFlow['ticks'] {
  if (!(total > 0)) return [];
  const majors = ticks(0, total, figures);
  const step = (majors[1] ?? total) - (majors[0] ?? 0);
  const parts = bottom - top > figures * 50 ? 10 : 5;
  const at = (value: number) => bottom - (value / total) * (bottom - top);
  const count = Math.floor((total / step) * parts + 1e-9);
  return Array.from({ length: count + 1 }, (_, index) => {
    const value = (index * step) / parts;
    return { y: at(value), value: Number(value.toPrecision(12)), major: index % parts === 0 };
  });
}
