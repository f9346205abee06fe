import type { ReactNode } from 'react';

interface Props {
  /** Read out in place of what is drawn. */
  label: string;
  isPinned: boolean;
  /** Pointed at or reached by the Tab key; false: no longer. */
  onPoint: (isPointed: boolean) => void;
  /** Pressed: kept until it is pressed again. */
  onPin: () => void;
  children: ReactNode;
}

/** A part of a drawing that is read by pointing at it, by the Tab key, or with a press that keeps it. */
export function DrawnPart({ label, isPinned, onPoint, onPin, children }: Props) {
  return (
    // biome-ignore lint/a11y/useSemanticElements: a part of a drawing; SVG has no button
    <g
      role="button"
      tabIndex={0}
      aria-label={label}
      aria-pressed={isPinned}
      className="group cursor-pointer outline-none"
      onPointerEnter={() => onPoint(true)}
      onPointerLeave={() => onPoint(false)}
      onFocus={() => onPoint(true)}
      onBlur={() => onPoint(false)}
      onClick={onPin}
      onKeyDown={(event) => {
        if (event.key !== 'Enter' && event.key !== ' ') return;
        event.preventDefault();
        onPin();
      }}
    >
      {children}
    </g>
  );
}
