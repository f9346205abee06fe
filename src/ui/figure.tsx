import { NBSP, type Quantity } from '../lib/format.ts';

/** The one number that a screen is about, wide and heavy, with its unit set small: `1,290 g`, `2 lb 13.5 oz`. */
export function Figure({ pieces, className = '' }: { pieces: readonly Quantity[]; className?: string }) {
  return (
    <span className={`type-figure ${className}`}>
      {pieces.map(({ value, unit }, index) => (
        <span key={unit} className={`whitespace-nowrap ${index > 0 ? 'ml-[0.18em]' : ''}`}>
          {value}
          {/* The space in front belongs to the small unit, or it would be as wide as a figure. */}
          <span className="text-[0.4em] font-[500] tracking-normal [font-stretch:100%]">
            {NBSP}
            {unit}
          </span>
        </span>
      ))}
    </span>
  );
}
