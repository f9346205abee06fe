import type { ButtonHTMLAttributes, ReactNode, Ref } from 'react';
import { Link, type LinkProps } from 'react-router-dom';

/** `act`: the one next thing. `plain`: anything else. `quiet`: looks like a link. `grave`: destructive, names its consequence; ink, for red is danger alone. */
export type ButtonKind = 'act' | 'plain' | 'quiet' | 'grave';

const KINDS: Record<ButtonKind, string> = {
  act: 'bg-rest text-on-rest hover:bg-rest-strong',
  plain: 'border border-edge bg-sheet text-ink hover:border-ink',
  quiet: 'text-rest underline decoration-1 underline-offset-[3px] hover:decoration-2',
  grave: 'bg-ink text-ground hover:opacity-90',
};

const look = (kind: ButtonKind, wide: boolean) =>
  `type-narrow inline-flex items-center justify-center gap-2 text-center leading-tight font-[600] no-underline disabled:cursor-not-allowed disabled:bg-well disabled:text-ink-soft ${
    wide ? 'min-h-14 w-full px-5 py-2 text-[1.1875rem]' : kind === 'quiet' ? 'min-h-12' : 'min-h-12 px-5 py-2'
  } ${KINDS[kind]}`;

interface Own {
  kind?: ButtonKind;
  /** As wide as its place and 56 px high: the main action of a field screen. */
  wide?: boolean;
  /** The action runs; the button keeps its size, says so, and takes no second press. */
  busy?: boolean;
  children: ReactNode;
}

export function Button({
  kind = 'plain',
  wide = false,
  busy = false,
  children,
  className = '',
  type = 'button',
  onClick,
  ...rest
}: Own & ButtonHTMLAttributes<HTMLButtonElement> & { ref?: Ref<HTMLButtonElement> }) {
  return (
    <button
      type={type}
      className={`${look(kind, wide)} ${className}`}
      aria-busy={busy || undefined}
      onClick={busy ? (event) => event.preventDefault() : onClick}
      {...rest}
    >
      {children}
      {busy ? <span aria-hidden="true" className="size-2 animate-pulse bg-current" /> : null}
    </button>
  );
}

/** A link that looks like a button: it goes somewhere, so it can be opened in another tab. */
export function ButtonLink({
  kind = 'plain',
  wide = false,
  children,
  className = '',
  ...rest
}: Omit<Own, 'busy'> & LinkProps) {
  return (
    <Link className={`${look(kind, wide)} ${className}`} {...rest}>
      {children}
    </Link>
  );
}
