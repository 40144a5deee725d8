import Link from 'next/link';
import type { ComponentProps, ReactNode } from 'react';
import { cn } from './cn';
import { Key } from './key';

/** ink: the one primary action of a screen · quiet: the others · light: something is wrong or can't be undone. */
export type ButtonVariant = 'ink' | 'quiet' | 'light' | 'bare';
export type ButtonSize = 'small' | 'normal' | 'bench';

interface Look {
  variant?: ButtonVariant;
  size?: ButtonSize;
  /** The key that does the same; only shows it, `lib/client` listens. */
  hint?: string;
}

const variants: Record<ButtonVariant, string> = {
  ink: 'bg-ink text-sheet hover:bg-ink/85',
  quiet:
    'text-ink shadow-[inset_0_0_0_1.5px_var(--line)] hover:shadow-[inset_0_0_0_1.5px_var(--ink)]',
  light: 'bg-light text-light-on hover:bg-light/90',
  bare: 'text-ink hover:bg-line-2 px-3',
};
const sizes: Record<ButtonSize, string> = {
  small: 'min-h-8 px-3 py-1 text-[13.5px]',
  normal: 'min-h-10 px-[18px] py-2',
  bench: 'min-h-12 px-6 py-2.5 text-[17px]',
};

function lookOf({ variant = 'ink', size = 'normal' }: Look, className?: string) {
  return cn(
    'inline-flex items-center justify-center gap-2 rounded-full text-center font-semibold leading-tight no-underline transition-colors focus-visible:rounded-full',
    'disabled:bg-line-2 disabled:text-ink-3 disabled:shadow-none aria-disabled:bg-line-2 aria-disabled:text-ink-3 aria-disabled:shadow-none',
    sizes[size],
    variants[variant],
    className,
  );
}

function Hint({ hint }: { hint: string | undefined }) {
  return hint ? <Key aria-hidden="true">{hint}</Key> : null;
}

export function Button({
  variant,
  size,
  hint,
  busy = false,
  className,
  children,
  type = 'button',
  disabled,
  ...rest
}: ComponentProps<'button'> & Look & { busy?: boolean }) {
  return (
    <button
      type={type}
      className={lookOf({ variant, size }, className)}
      disabled={disabled || busy}
      aria-busy={busy || undefined}
      aria-keyshortcuts={hint}
      {...rest}
    >
      {busy ? <Working /> : null}
      {children}
      <Hint hint={hint} />
    </button>
  );
}

export function ButtonLink({
  variant = 'quiet',
  size,
  hint,
  className,
  children,
  ...rest
}: ComponentProps<typeof Link> & Look & { children: ReactNode }) {
  return (
    <Link className={lookOf({ variant, size }, className)} aria-keyshortcuts={hint} {...rest}>
      {children}
      <Hint hint={hint} />
    </Link>
  );
}

function Working() {
  return (
    <span
      aria-hidden="true"
      className="size-3.5 motion-safe:animate-spin rounded-full border-2 border-current border-r-transparent"
    />
  );
}
