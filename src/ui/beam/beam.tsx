import { memo, useLayoutEffect, useMemo, useRef, useState } from 'react';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Hatch } from '../hatch.tsx';
import type { BeamSegment, BeamSpec } from './beam-spec.ts';
import { figureOf } from './figure-of.ts';
import {
  BAR,
  type BeamLayout,
  FONT,
  type LaidMark,
  type LaidSegment,
  layOutBeam,
  type PlacedName,
  POISE_HEIGHT,
} from './lay-out-beam.ts';

interface Props {
  spec: BeamSpec;
  /** The drawing in one sentence, with its figures. */
  summary: string;
  className?: string;
  /** It stands inside a button or a link: their name takes no more than `summary`, and nothing at all if that is empty. */
  inControl?: boolean;
}

/** Before the place has been measured, and where nothing can be (tests). */
const USUAL_WIDTH = 324;

/**
 * The steelyard: a graduated beam, drawn to scale, on which every mass that matters is shown. The same figures stand
 * beside it as a list for those who do not see it. It moves only when a value changes.
 */
export const Beam = memo(function Beam({ spec, summary, className = '', inControl = false }: Props) {
  const t = useMessages();
  const { locale } = usePreferences();
  const { ref, width, moves } = useWidth();
  const layout = useMemo(
    () => layOutBeam(spec, width, (value) => figureOf(value, spec.unit, locale)),
    [spec, width, locale],
  );
  const said = (value: number) => figureOf(value, spec.unit, locale);
  const unit = spec.unit === 'lbOz' ? '' : spec.unit;
  return (
    <figure className={className} ref={ref}>
      <svg
        role="img"
        aria-label={summary}
        aria-hidden={summary === '' || undefined}
        width={layout.width}
        height={layout.height}
        viewBox={`0 0 ${layout.width} ${layout.height}`}
        className={`block w-full overflow-visible ${moves ? '[&_.glide]:transition-transform [&_.glide]:duration-300 [&_.glide]:ease-beam' : ''}`}
        style={{ fontSize: FONT, fontStretch: '78%', fontWeight: 500, letterSpacing: '0.012em' }}
      >
        <Hatch id="beam-hatch" className="fill-ink-soft" />
        {layout.band ? <Band layout={layout} /> : null}
        <Ticks layout={layout} />
        <Body layout={layout} />
        {layout.segments.map((segment, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a segment is its place in the order
          <Bar key={index} segment={segment} y={layout.beamY - BAR} />
        ))}
        {layout.counter.map((segment, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a segment is its place in the order
          <Bar key={index} segment={segment} y={layout.beamY + 5} />
        ))}
        <Stems layout={layout} />
        {layout.marks.map((mark, index) => (
          // biome-ignore lint/suspicious/noArrayIndexKey: a mark is its place in the order
          <Mark key={index} mark={mark} layout={layout} />
        ))}
        {spec.poise && layout.poiseX !== null ? (
          <Poise x={layout.poiseX} y={layout.beamY} kind={spec.poise.kind} />
        ) : null}
        <Texts layout={layout} />
      </svg>
      {inControl ? null : (
        <dl className="sr-only" aria-label={t('ui.beam.table')}>
          {[...spec.segments, ...(spec.counter ?? []), ...(spec.marks ?? []), ...(spec.poise ? [spec.poise] : [])].map(
            (part, index) => (
              // biome-ignore lint/suspicious/noArrayIndexKey: labels may repeat, their order does not
              <div key={index}>
                <dt>{part.label}</dt>
                <dd>
                  {'at' in part ? said(part.at) : `${said(part.from)} - ${said(part.to)}`} {unit}
                </dd>
              </div>
            ),
          )}
        </dl>
      )}
    </figure>
  );
});

/** The width of the place, and whether a change now may move: not at the first drawing, not while the place resizes. */
function useWidth() {
  const ref = useRef<HTMLElement>(null);
  const [{ width, moves }, set] = useState({ width: USUAL_WIDTH, moves: false });
  useLayoutEffect(() => {
    const element = ref.current;
    if (!element || typeof ResizeObserver === 'undefined') return;
    const measure = () => {
      const now = Math.floor(element.clientWidth);
      set((before) => (now === 0 || now === before.width ? { ...before, moves: true } : { width: now, moves: false }));
    };
    measure();
    const observer = new ResizeObserver(measure);
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return { ref, width, moves };
}

const FILL: Record<BeamSegment['kind'], string> = {
  rest: 'fill-rest-fill',
  move: 'fill-move-fill',
  gone: 'fill-[url(#beam-hatch)]',
  free: 'fill-transparent stroke-edge',
};

/** The beam itself: thicker at its fulcrum, thinner towards its end, as a steelyard is. */
function Body({ layout: { left, right, beamY, zeroX } }: { layout: BeamLayout }) {
  return (
    <>
      <path d={`M${left - 1} ${beamY}H${right + 1}V${beamY + 1.5}L${left - 1} ${beamY + 4}Z`} className="fill-ink" />
      {zeroX === null ? null : <path d={`M${zeroX} ${beamY + 2}l5.5 9h-11z`} className="fill-ink" />}
    </>
  );
}

function Bar({ segment, y }: { segment: LaidSegment; y: number }) {
  // Drawn one wide and stretched, so that only a transform changes and the browser can move it smoothly.
  const transform = `translate(${segment.x}px, ${y}px) scaleX(${Math.max(segment.width, 0)})`;
  if (segment.kind === 'free' || segment.kind === 'gone') {
    return (
      <rect
        x={segment.x + 0.5}
        y={y + 0.5}
        width={Math.max(segment.width - 1, 0)}
        height={BAR - 1}
        className={FILL[segment.kind]}
      />
    );
  }
  return <rect width="1" height={BAR} className={`glide ${FILL[segment.kind]}`} style={{ transform }} />;
}

function Ticks({ layout: { ticks, beamY, counter } }: { layout: BeamLayout }) {
  const y = beamY + (counter.length > 0 ? BAR + 4 : 0);
  const length = { major: 10, middle: 7.5, minor: 5 };
  const path = (size: 'major' | 'middle' | 'minor') =>
    ticks
      .filter((tick) => tick.size === size)
      .map((tick) => `M${tick.x.toFixed(2)} ${y}v${length[size]}`)
      .join('');
  return (
    <>
      <path d={path('major')} className="stroke-ink" />
      <path d={path('middle')} className="stroke-ink-soft" />
      <path d={path('minor')} className="stroke-edge" strokeWidth="0.9" />
    </>
  );
}

function Band({ layout: { band, beamY } }: { layout: BeamLayout }) {
  if (!band) return null;
  const top = beamY - BAR - 9;
  return (
    <g>
      <rect x={band.x} y={top} width={Math.max(band.width, 1)} height={BAR + 9} className="fill-rest-fill opacity-35" />
      <path d={`M${band.x} ${top}v${BAR + 9}M${band.x + band.width} ${top}v${BAR + 9}`} className="stroke-rest" />
    </g>
  );
}

function Mark({ mark, layout: { beamY } }: { mark: LaidMark; layout: BeamLayout }) {
  const top = beamY - BAR - POISE_HEIGHT + 3;
  const glide = { transform: `translateX(${mark.x}px)` };
  if (mark.beyond) {
    return (
      <g className="glide" style={glide}>
        <path d={`M-1.5 ${beamY - BAR - 5.5}l6 4.5-6 4.5`} className="fill-none stroke-ink" strokeWidth="2" />
      </g>
    );
  }
  switch (mark.kind) {
    case 'stop':
      return (
        <g className="glide" style={glide}>
          <path d={`M-1.75 ${top}h3.5V${beamY + 6}h-3.5z`} className="fill-ink" />
          <path d={`M-4.5 ${top}h9v2.5h-9z`} className="fill-ink" />
        </g>
      );
    case 'target':
      return (
        <g className="glide" style={glide}>
          <path d={`M-1.5 ${top}h3V${beamY + 6}h-3z`} className="fill-rest" />
        </g>
      );
    case 'limit':
      return (
        <g className="glide" style={glide}>
          <path d={`M-1 ${top}h2V${beamY + 6}h-2z`} className="fill-ink" />
        </g>
      );
    case 'note':
      return (
        <g className="glide" style={glide}>
          <path d={`M0 ${top}V${beamY}`} className="stroke-ink-soft" strokeDasharray="2 2" />
        </g>
      );
  }
}

/** The sliding weight: a collar that tapers to a point where it rests on the beam. */
function Poise({ x, y, kind }: { x: number; y: number; kind: 'rest' | 'move' }) {
  const top = -BAR - POISE_HEIGHT;
  return (
    <g className="glide" style={{ transform: `translate(${x}px, ${y}px)` }}>
      <path
        d={`M-7.5 ${top}h15v3.2l-1.6 1L1.1 ${-BAR}V2h-2.2V${-BAR}L-5.9 ${top + 4.2}l-1.6-1z`}
        className={`${kind === 'move' ? 'fill-move' : 'fill-rest'} stroke-ground`}
        strokeWidth="1.5"
        paintOrder="stroke"
      />
    </g>
  );
}

/** Hairlines from a label on a higher row down to its point. */
function Stems({ layout }: { layout: BeamLayout }) {
  const foot = layout.beamY - BAR - POISE_HEIGHT;
  return (
    <path
      d={layout.above
        .map(({ at, row, x, width }) => {
          // Under its text, or along it where the text stands beside the stem.
          const top = layout.rowAboveY(row) + (at < x || at > x + width ? -10 : 4);
          return `M${at.toFixed(2)} ${top}V${foot + 2}`;
        })
        .join('')}
      className="stroke-ink-soft"
      strokeWidth="0.8"
    />
  );
}

function Texts({ layout }: { layout: BeamLayout }) {
  return (
    <>
      {layout.above.map((label) => (
        <text
          key={label.key}
          x={label.x + label.width / 2}
          y={layout.rowAboveY(label.row)}
          textAnchor="middle"
          className={label.key === 'poise' ? 'fill-ink font-[650]' : 'fill-ink-soft'}
        >
          {label.text}
        </text>
      ))}
      {layout.figures.map((figure) => (
        <text key={figure.text} x={figure.x} y={layout.figuresY} textAnchor={figure.anchor} className="fill-ink-soft">
          {figure.text}
        </text>
      ))}
      {layout.below.map((name) => (
        <Name key={name.key} name={name} y={layout.rowBelowY(name.row)} />
      ))}
      {layout.namesAbove.map((name) => (
        <Name key={name.key} name={name} y={layout.rowAboveY(name.row)} />
      ))}
    </>
  );
}

function Name({ name, y }: { name: PlacedName; y: number }) {
  return (
    <g transform={`translate(${name.x.toFixed(2)} ${y})`}>
      <rect y={-8} width="8" height="8" className={FILL[name.kind]} />
      <text x={13} className="fill-ink-soft">
        {name.text}
      </text>
    </g>
  );
}
