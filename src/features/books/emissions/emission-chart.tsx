import { useMemo, useRef, useState } from 'react';
import type { EmissionsResponse } from '../../../../shared/books/emissions.schema.ts';
import { MASS_FACTORS } from '../../../../shared/units/factors.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { DrawnPart } from '../../../ui/drawn-part.tsx';
import { Hatch } from '../../../ui/hatch.tsx';
import { useWidth } from '../../../ui/use-width.ts';
import { asTitle, bookMass, longMonth } from '../book-words.ts';
import { type LaidBar, layOutBars, lossesByMonth, type MonthLoss } from './month-bars.ts';

const HEIGHT = 190;
const TOP = 16;
const LEFT = 46;

/** Losses by month on hairlines: hatched as all that is gone. Each month is read by pointing, by Tab or with a press. */
export function EmissionChart({ emissions, from, to }: { emissions: EmissionsResponse; from: string; to: string }) {
  const t = useMessages();
  const format = useFormat();
  const { mass } = usePreferences();
  const unit = mass === 'lbOz' || mass === 'oz' ? 'lb' : 'kg';
  const ref = useRef<HTMLElement>(null);
  const width = useWidth(ref);
  const losses = useMemo(() => lossesByMonth(emissions.lines, from, to), [emissions.lines, from, to]);
  const layout = useMemo(
    () => layOutBars(losses, MASS_FACTORS[unit].perUnit.valueOf(), { left: LEFT, width, height: HEIGHT }),
    [losses, unit, width],
  );
  const [pinned, setPinned] = useState<string | null>(null);
  const [pointed, setPointed] = useState<string | null>(null);
  const largest = losses.reduce((most, loss) => (loss.totalG > most.totalG ? loss : most), losses[0] as MonthLoss);
  const active = losses.find(({ month }) => month === (pointed ?? pinned)) ?? largest;
  const read = (loss: MonthLoss) =>
    t('books.emissions.month', {
      month: asTitle(longMonth(format.locale, loss.month)),
      mass: bookMass(format, loss.totalG),
      co2e: loss.co2eT === null ? t('books.emissions.noFigure') : format.tonnes(loss.co2eT),
    });
  const step = Math.ceil(losses.length / Math.max(1, Math.floor((width - LEFT) / 40)));
  return (
    <figure ref={ref} className="pt-3">
      {/* biome-ignore lint/a11y/useSemanticElements: a drawing whose parts are read one by one; SVG has no fieldset */}
      <svg
        role="group"
        aria-label={t('books.emissions.byMonth')}
        width={width}
        height={HEIGHT + TOP + 26}
        viewBox={`0 ${-TOP} ${width} ${HEIGHT + TOP + 26}`}
        className="block w-full overflow-visible"
        style={{ fontSize: 13, fontStretch: '78%' }}
      >
        <Hatch id="loss-hatch" className="fill-ink" />
        {layout.figures.map(({ value, y }) => (
          // biome-ignore lint/a11y/noAriaHiddenOnFocusable: a g takes no focus
          <g key={value} aria-hidden="true">
            <path d={`M${LEFT} ${y}H${width}`} className={value === 0 ? 'stroke-ink' : 'stroke-rule-faint'} />
            <text x={LEFT - 6} y={y + 4.5} textAnchor="end" className="fill-ink-soft">
              {value === layout.figures.at(-1)?.value ? `${format.number(value)} ${unit}` : format.number(value)}
            </text>
          </g>
        ))}
        {layout.bars.map((bar, index) => (
          <Bar
            key={bar.loss.month}
            bar={bar}
            slot={(width - LEFT) / layout.bars.length}
            label={read(bar.loss)}
            name={index % step === 0 ? shortMonth(format.month(bar.loss.month), bar.loss.month, index) : null}
            isActive={bar.loss.month === active.month}
            isPinned={pinned === bar.loss.month}
            onPoint={setPointed}
            onPin={() => setPinned((now) => (now === bar.loss.month ? null : bar.loss.month))}
          />
        ))}
      </svg>
      <figcaption className="min-h-10 border-t border-rule pt-2">
        <span className="font-[600]">{read(active)}</span>
        {active.atLeastG === 0 ? null : (
          <> {t('books.emissions.atLeast', { mass: bookMass(format, active.atLeastG) })}</>
        )}
      </figcaption>
    </figure>
  );
}

/** The year stands at the first and at each January; the others are told by their month alone. */
function shortMonth(words: string, month: string, index: number): string {
  return index === 0 || month.endsWith('-01') ? words : words.replace(/[\s,]*\b(de )?\d{4}\b[\s,]*/u, '').trim();
}

function Bar({
  bar: { loss, x, width, y, height },
  slot,
  label,
  name,
  isActive,
  isPinned,
  onPoint,
  onPin,
}: {
  bar: LaidBar;
  slot: number;
  label: string;
  name: string | null;
  isActive: boolean;
  isPinned: boolean;
  onPoint: (month: string | null) => void;
  onPin: () => void;
}) {
  const middle = x + width / 2;
  return (
    <DrawnPart
      label={label}
      isPinned={isPinned}
      onPoint={(isPointed) => onPoint(isPointed ? loss.month : null)}
      onPin={onPin}
    >
      {/* The whole slot is hit, however low the bar is. */}
      <rect
        x={middle - slot / 2}
        y={-TOP}
        width={slot}
        height={HEIGHT + TOP + 24}
        fill="transparent"
        className="stroke-transparent group-focus-visible:stroke-ink"
        strokeWidth="2"
      />
      <rect
        x={x}
        y={y}
        width={width}
        height={height}
        fill="url(#loss-hatch)"
        className="stroke-ink"
        strokeWidth="0.8"
      />
      {isActive ? <path d={`M${x} ${HEIGHT + 3}h${width}v3h${-width}z`} className="fill-ink" /> : null}
      {name ? (
        <text
          x={middle}
          y={HEIGHT + 20}
          textAnchor="middle"
          className={isActive ? 'fill-ink font-[650]' : 'fill-ink-soft'}
        >
          {name}
        </text>
      ) : null}
    </DrawnPart>
  );
}
