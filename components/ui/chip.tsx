import type { ComponentProps } from 'react';
import { cn } from './cn';

/** A short word about a thing: a state, a kind, a filter. `on` is chosen; `want` asks for a hand. */
export function Chip({
  tone = 'plain',
  className,
  ...rest
}: ComponentProps<'span'> & { tone?: 'plain' | 'on' | 'want' }) {
  const tones = {
    plain: 'bg-line-2 text-ink-2',
    on: 'bg-ink text-sheet',
    want: 'bg-light-soft text-ink',
  };
  return (
    <span
      className={cn(
        'inline-flex items-center gap-1.5 whitespace-nowrap rounded-full px-2.5 py-0.5 text-[12.5px] font-[560]',
        tones[tone],
        className,
      )}
      {...rest}
    />
  );
}

/** A unit's tag, a serial, a hash. */
export function Tag({ className, ...rest }: ComponentProps<'span'>) {
  return <span className={cn('mono whitespace-nowrap', className)} {...rest} />;
}
