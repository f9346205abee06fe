import { ticks as roundValues } from 'd3-array';
import type { BeamMark, BeamSegment, BeamSpec } from './beam-spec.ts';
import { type LabelWish, type PlacedLabel, placeLabels } from './place-labels.ts';
import { textWidth } from './text-width.ts';

/** Sizes in px. The drawing is never scaled: its text keeps its size at every width. */
export const FONT = 13;
const ROW = 17;
/** Room for half a poise and half a heavy mark at either end. */
const SIDE = 8;
export const POISE_HEIGHT = 21;
export const BAR = 9;
const TICKS = 10;
const SWATCH = 13;
const GAP = 9;
/** From the ticks' foot to the baseline of their figures. */
const FIGURES = 13;

export interface Tick {
  x: number;
  size: 'major' | 'middle' | 'minor';
}
export interface PlacedText extends PlacedLabel {
  text: string;
}
/** The name of a segment, with its swatch. */
export interface PlacedName extends PlacedText {
  kind: BeamSegment['kind'];
}
export interface LaidSegment extends BeamSegment {
  x: number;
  width: number;
}
export interface LaidMark extends BeamMark {
  x: number;
  /** Further than the scale reaches: an arrow at its end. */
  beyond: boolean;
}

export interface BeamLayout {
  width: number;
  height: number;
  /** Upper edge of the beam. */
  beamY: number;
  left: number;
  right: number;
  zeroX: number | null;
  segments: LaidSegment[];
  counter: LaidSegment[];
  poiseX: number | null;
  marks: LaidMark[];
  band: { x: number; width: number } | null;
  ticks: Tick[];
  /** Below the ticks. */
  figures: { x: number; text: string; anchor: 'start' | 'middle' | 'end' }[];
  figuresY: number;
  /** Above the beam; `y` of a row's baseline by `rowY`. */
  above: PlacedText[];
  /** Names of the segments under the figures; of a two-sided beam's upper side above it. */
  below: PlacedName[];
  namesAbove: PlacedName[];
  rowAboveY: (row: number) => number;
  rowBelowY: (row: number) => number;
}

/** Turns a beam into coordinates. Pure: the same beam at the same width is always drawn alike. */
export function layOutBeam(spec: BeamSpec, width: number, format: (value: number) => string): BeamLayout {
  const left = SIDE;
  const right = Math.max(width - SIDE, left + 1);
  const [from, to] = spec.domain;
  const scale: Scale = (value) => left + ((value - from) / (to - from || 1)) * (right - left);
  const [least, most] = [Math.min(...spec.domain), Math.max(...spec.domain)];
  const x = (value: number) => scale(Math.min(Math.max(value, least), most));
  const lay = (segments: readonly BeamSegment[]): LaidSegment[] =>
    segments.map((segment) => {
      const [a, b] = [x(segment.from), x(segment.to)];
      return { ...segment, x: Math.min(a, b), width: Math.abs(b - a) };
    });
  const segments = lay(spec.segments);
  const counter = lay(spec.counter ?? []);
  const marks = (spec.marks ?? []).map((mark) => ({
    ...mark,
    x: x(mark.at),
    beyond: mark.at > most || mark.at < least,
  }));
  const poiseX = spec.poise ? x(spec.poise.at) : null;

  const above = placeAbove(spec, marks, poiseX, width);
  // With two sides each has its names on its own: above what lies on the beam, below what hangs under it.
  const namesAbove = counter.length > 0 ? placeNames(segments, width) : [];
  const rowsAbove = [...above, ...namesAbove].reduce((rows, label) => Math.max(rows, label.row + 1), 0);
  const beamY = rowsAbove * ROW + (poiseX === null && marks.length === 0 ? 4 : POISE_HEIGHT + 4) + BAR;

  const { ticks, majors } = ticksOf(spec, scale, right - left);
  const underBeam = beamY + (counter.length > 0 ? BAR + 4 : 0);
  const figuresY = underBeam + TICKS + FIGURES;
  const below = placeNames(counter.length > 0 ? counter : segments, width);
  const rowsBelow = below.reduce((rows, label) => Math.max(rows, label.row + 1), 0);
  return {
    width,
    beamY,
    left,
    right,
    zeroX: spec.domain[0] === 0 && most > 0 && counter.length === 0 ? x(0) : null,
    segments,
    counter,
    poiseX,
    marks,
    band: spec.band
      ? { x: Math.min(x(spec.band.from), x(spec.band.to)), width: Math.abs(x(spec.band.to) - x(spec.band.from)) }
      : null,
    ticks,
    figures: figuresOf(majors, spec.unit, width, format),
    figuresY,
    above,
    namesAbove,
    below,
    rowAboveY: (row) => (rowsAbove - row) * ROW - 4,
    rowBelowY: (row) => figuresY + 6 + (row + 1) * ROW - 4,
    height: figuresY + 6 + rowsBelow * ROW + 2,
  };
}

const WEIGHT: Record<BeamMark['kind'], number> = { stop: 4, target: 4, limit: 3, note: 1 };

function placeAbove(spec: BeamSpec, marks: readonly LaidMark[], poiseX: number | null, width: number): PlacedText[] {
  const texts = new Map<string, string>();
  const wishes: LabelWish[] = [];
  const wish = (key: string, text: string, at: number, weight: number) => {
    if (text === '') return;
    texts.set(key, text);
    wishes.push({ key, at, width: textWidth(text, FONT), weight });
  };
  if (spec.poise && poiseX !== null) wish('poise', spec.poise.label, poiseX, 5);
  for (const [index, mark] of marks.entries()) wish(`mark${index}`, mark.label, mark.x, WEIGHT[mark.kind]);
  const placed = placeLabels(wishes, { width, gap: GAP, rows: 4, stems: true });
  return placed.map((label) => ({ ...label, text: texts.get(label.key) ?? '' }));
}

function placeNames(segments: readonly LaidSegment[], width: number): PlacedName[] {
  const named = segments.filter((segment) => segment.label !== '');
  const wishes = named.map((segment, index): LabelWish => {
    const text = textWidth(segment.label, FONT) + SWATCH;
    return { key: String(index), at: segment.x + segment.width / 2, width: text, weight: segment.width };
  });
  return placeLabels(wishes, { width, gap: GAP, rows: 3, stems: false }).map((label) => {
    const segment = named[Number(label.key)] as LaidSegment;
    return { ...label, text: segment.label, kind: segment.kind };
  });
}

/** A figure's place in px. Linear only; d3-scale would bring 7 kB of colours and dates along for it. */
type Scale = (value: number) => number;

/** Round figures of pounds and ounces, in ounces, each with the parts that it may be cut into, most first. */
const OUNCE_STEPS: readonly (readonly [step: number, parts: readonly number[]])[] = [
  [0.1, [10, 5, 2]],
  [0.2, [4, 2]],
  [0.5, [5]],
  [1, [10, 5, 2]],
  [2, [4, 2]],
  [4, [8, 4, 2]],
  [8, [8, 4, 2]],
  [16, [16, 8, 4, 2]],
  [32, [8, 4, 2]],
  [80, [5]],
  [160, [10, 5, 2]],
  [320, [4, 2]],
  [800, [5]],
];

/** Values of the major ticks, in the order of the scale, and the parts that their step may be cut into. */
function majorsOf(
  { domain: [from, to], unit }: BeamSpec,
  count: number,
): { values: number[]; wanted: readonly number[] } {
  if (unit === 'lbOz') {
    const span = Math.abs(to - from);
    const [step, wanted] = OUNCE_STEPS.find(([each]) => span / each <= count + 0.5) ?? [1600, [10, 5, 2]];
    const values: number[] = [];
    const most = Math.max(from, to) + step * 1e-9;
    for (let i = Math.ceil(Math.min(from, to) / step - 1e-9); i * step <= most; i++) values.push(i * step);
    return { values: from > to ? values.reverse() : values, wanted };
  }
  const values = roundValues(from, to, count);
  const step = values.length > 1 ? Math.abs((values[1] as number) - (values[0] as number)) : 0;
  const lead = step > 0 ? Math.round(step / 10 ** Math.floor(Math.log10(step) + 1e-9)) : 1;
  // A step of 1 is ten parts, of 2 four, of 5 five: each minor tick is a round figure too.
  return { values, wanted: lead === 2 ? [4, 2] : lead === 5 ? [5] : [10, 5, 2] };
}

function ticksOf(spec: BeamSpec, scale: Scale, length: number) {
  const count = Math.max(2, Math.min(10, Math.round(length / 105)));
  const { values, wanted } = majorsOf(spec, count);
  const majors = values.map((value) => ({ value, x: scale(value) }));
  const ticks: Tick[] = majors.map(({ x }) => ({ x, size: 'major' }));
  const step = values.length > 1 ? Math.abs((values[1] as number) - (values[0] as number)) : 0;
  if (step > 0) {
    const perPx = Math.abs(scale(step) - scale(0));
    const parts = wanted.find((n) => perPx / n >= 4.5) ?? 1;
    const [from, to] = [Math.min(...spec.domain), Math.max(...spec.domain)];
    const small = step / parts;
    for (let i = Math.ceil(from / small - 1e-9); i * small <= to + small * 1e-9; i++) {
      if (i % parts === 0) continue;
      ticks.push({ x: scale(i * small), size: parts % 2 === 0 && i % (parts / 2) === 0 ? 'middle' : 'minor' });
    }
  }
  return { ticks, majors };
}

/** Figures under the major ticks; one that would touch its neighbour gives way, the first and the last stay. */
function figuresOf(
  majors: readonly { value: number; x: number }[],
  unit: string,
  width: number,
  format: (value: number) => string,
): BeamLayout['figures'] {
  const figures = majors.map(({ value, x }, index) => {
    const text = index === majors.length - 1 && unit !== 'lbOz' ? `${format(value)}\u00a0${unit}` : format(value);
    const half = textWidth(text, FONT) / 2;
    const start = Math.min(Math.max(x - half, 0), width - half * 2);
    return { x, text, start, end: start + half * 2 };
  });
  const kept: typeof figures = [];
  for (const [index, figure] of figures.entries()) {
    const last = figures.at(-1) as (typeof figures)[number];
    const before = kept.at(-1);
    if (before && figure.start < before.end + GAP) continue;
    if (index < figures.length - 1 && figure.end + GAP > last.start) continue;
    kept.push(figure);
  }
  return kept.map(({ x, text, start, end }) => {
    const centred = Math.abs((start + end) / 2 - x) < 0.5;
    return centred
      ? { x, text, anchor: 'middle' as const }
      : start === 0
        ? { x: 0, text, anchor: 'start' as const }
        : { x: width, text, anchor: 'end' as const };
  });
}
