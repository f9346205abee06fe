import { useMemo, useRef, useState } from 'react';
import type { BooksResponse } from '../../../shared/books/books.schema.ts';
import { MASS_FACTORS } from '../../../shared/units/factors.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { textWidth } from '../../ui/beam/text-width.ts';
import { DrawnPart } from '../../ui/drawn-part.tsx';
import { Hatch } from '../../ui/hatch.tsx';
import { useWidth } from '../../ui/use-width.ts';
import { bookMass, partWords } from './book-words.ts';
import { type FlowKind, type FlowPart, flowSides } from './flow-parts.ts';
import { FlowReadout } from './flow-readout.tsx';
import { type LaidFlow, type LaidRibbon, layOutFlow } from './lay-out-flow.ts';

const NAME_PX = 14;

/**
 * The books in one picture: what was there and came in flows onto a standing beam, and from it to where it went. Widths
 * are to the beam's scale. Verdigris lies at rest, copper moved, what is lost is hatched, a difference is solid ink.
 */
export function FlowPicture({ books }: { books: BooksResponse }) {
  const t = useMessages();
  const format = useFormat();
  const ref = useRef<HTMLElement>(null);
  const width = useWidth(ref);
  const { mass } = usePreferences();
  // A stock is read in kilograms or pounds, whatever a single charge is read in.
  const unit = mass === 'lbOz' || mass === 'oz' ? 'lb' : 'kg';
  const sides = useMemo(() => flowSides(books.equation), [books.equation]);
  const layout = useMemo(() => {
    const roomy = width >= 640;
    const most = roomy ? 210 : 104;
    const needed = (parts: readonly FlowPart[]) =>
      Math.min(
        most,
        Math.max(40, ...parts.map((part) => wordsWidth(partWords(t, part), bookMass(format, part.massG), most))),
      );
    return layOutFlow(sides, MASS_FACTORS[unit].perUnit.valueOf(), {
      width,
      labelWidths: { left: needed(sides.left), right: needed(sides.right) },
      labelHeight: roomy ? 46 : 52,
      beamHeight: roomy ? 264 : 220,
      beamWidth: roomy ? 100 : 16,
      figures: roomy ? 5 : 4,
    });
  }, [sides, width, unit, t, format]);
  const [pinned, setPinned] = useState<string | null>(null);
  const [pointed, setPointed] = useState<string | null>(null);
  const active = pointed ?? pinned;
  const shown = layout.ribbons.find(({ part }) => part.key === active)?.part ?? null;
  if (layout.ribbons.length === 0) return null;
  return (
    <figure ref={ref} aria-label={t('books.flow')}>
      {/* biome-ignore lint/a11y/useSemanticElements: a drawing whose parts are read one by one; SVG has no fieldset */}
      <svg
        role="group"
        aria-label={t('books.flow.summary', { mass: bookMass(format, books.equation.totalG) })}
        width={layout.width}
        height={layout.height + TOP}
        viewBox={`0 ${-TOP} ${layout.width} ${layout.height + TOP}`}
        className="block w-full overflow-visible"
        style={{ fontSize: NAME_PX, letterSpacing: '0.012em' }}
      >
        <Hatch id="flow-hatch" className="fill-ink-soft" />
        {layout.ribbons.map((ribbon) => (
          <Ribbon
            key={ribbon.part.key}
            ribbon={ribbon}
            layout={layout}
            dimmed={active !== null && active !== ribbon.part.key}
            isPinned={pinned === ribbon.part.key}
            words={partWords(t, ribbon.part)}
            figure={bookMass(format, ribbon.part.massG)}
            label={readingOf(t, format, ribbon, books.equation.totalG)}
            onPoint={setPointed}
            onPin={() => setPinned((now) => (now === ribbon.part.key ? null : ribbon.part.key))}
          />
        ))}
        <StandingBeam layout={layout} unit={unit} number={(value) => format.number(value, 3)} />
      </svg>
      <FlowReadout books={books} part={shown} />
    </figure>
  );
}

/** Room above for the total. */
const TOP = 26;

/** `bought, 90.0 lb, 15.7 % of all, 3 entries`. */
function readingOf(t: Translate, format: Formats, { part }: LaidRibbon, totalG: number): string {
  return t('books.flow.reading', {
    part: partWords(t, part),
    mass: bookMass(format, part.massG),
    percent: format.number((part.massG / totalG) * 100, 1),
  });
}

const FILL: Record<FlowKind, string> = {
  rest: 'fill-rest-fill',
  move: 'fill-move-fill',
  gone: 'fill-[url(#flow-hatch)]',
  open: 'fill-ink',
};

interface RibbonProps {
  ribbon: LaidRibbon;
  layout: LaidFlow;
  dimmed: boolean;
  isPinned: boolean;
  words: string;
  figure: string;
  label: string;
  onPoint: (key: string | null) => void;
  onPin: () => void;
}

/** One flow with its words. */
function Ribbon({ ribbon, layout, dimmed, isPinned, words, figure, label, onPoint, onPin }: RibbonProps) {
  const { part, side, outer, labelY, path } = ribbon;
  const atLeft = side === 'left';
  const edge = atLeft ? 0 : layout.width;
  const labelWidth = atLeft ? outer.x - 10 : layout.width - outer.x - 10;
  const lines = wrapped(words, labelWidth);
  const textX = atLeft ? outer.x - 10 : outer.x + 10;
  const anchor = atLeft ? 'end' : 'start';
  const firstY = labelY - (lines.length - 1) * 8;
  return (
    <DrawnPart
      label={label}
      isPinned={isPinned}
      onPoint={(isPointed) => onPoint(isPointed ? part.key : null)}
      onPin={onPin}
    >
      <path
        d={path}
        className={`${FILL[part.kind]} ${outer.height > 5 ? 'stroke-ground' : ''} transition-opacity duration-150 ${dimmed ? 'opacity-35' : ''}`}
        strokeWidth="0.75"
      />
      {/* A flow as thin as a hair is still as easy to hit as any other. */}
      <path d={path} fill="transparent" stroke="transparent" strokeWidth="14" />
      <rect
        x={Math.min(edge, textX)}
        y={labelY - 22}
        width={Math.abs(edge - textX)}
        height="44"
        fill="transparent"
        className="stroke-transparent group-focus-visible:stroke-ink"
        strokeWidth="2"
      />
      <text x={textX} y={firstY - 3} textAnchor={anchor} className="fill-ink text-[1.0625rem] font-[680]">
        {figure}
      </text>
      {lines.map((line, index) => (
        <text
          key={line}
          x={textX}
          y={firstY + 13 + index * 15}
          textAnchor={anchor}
          className="fill-ink-soft"
          style={{ fontStretch: '78%' }}
        >
          {line}
        </text>
      ))}
    </DrawnPart>
  );
}

/** The steelyard set upright: zero at the foot, round figures up to what was there and came in. */
function StandingBeam({
  layout: { beam, ticks },
  unit,
  number,
}: {
  layout: LaidFlow;
  unit: string;
  number: (value: number) => string;
}) {
  const roomy = beam.right - beam.left > 40;
  const { x, top, bottom } = beam;
  const majors = ticks.filter(({ major }) => major);
  return (
    // biome-ignore lint/a11y/noAriaHiddenOnFocusable: a g takes no focus
    <g aria-hidden="true">
      <path d={`M${beam.left} ${top}V${bottom}M${beam.right} ${top}V${bottom}`} className="stroke-rule" />
      <path d={`M${x - 1} ${top - 1}h2L${x + 2.5} ${bottom + 1}h-5z`} className="fill-ink" />
      <path d={`M${x - 7} ${bottom + 8}h14l-7 -7z`} className="fill-ink" />
      <path
        d={ticks.map(({ y, major }) => `M${x + 1.5} ${y.toFixed(2)}h${major ? 8 : 4.5}`).join('')}
        className="stroke-ink"
      />
      {roomy
        ? majors.map(({ y, value }, index) => (
            <text
              key={value}
              x={x - 7}
              y={y + 4.5}
              textAnchor="end"
              className="fill-ink-soft text-[0.8125rem]"
              style={{ fontStretch: '78%' }}
            >
              {index === majors.length - 1 ? `${number(value)} ${unit}` : number(value)}
            </text>
          ))
        : null}
    </g>
  );
}

/** Of a figure as it is set here: wider and heavier than the letters that were measured. */
const FIGURE_PX = 17 * 1.36;

/** What a part's words take, their name on two lines where one is too long, px. */
const wordsWidth = (name: string, figure: string, most: number): number =>
  Math.ceil(Math.max(textWidth(figure, FIGURE_PX), ...wrapped(name, most).map((line) => textWidth(line, NAME_PX)))) + 1;

/** Two lines at most, broken between words. */
function wrapped(text: string, width: number): string[] {
  if (textWidth(text, NAME_PX) <= width) return [text];
  const words = text.split(' ');
  const cuts = words.slice(1).map((_, cut) => [words.slice(0, cut + 1).join(' '), words.slice(cut + 1).join(' ')]);
  const widest = (lines: string[]) => Math.max(...lines.map((line) => textWidth(line, NAME_PX)));
  return cuts.sort((a, b) => widest(a) - widest(b))[0] ?? [text];
}
