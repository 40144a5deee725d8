import type { ComponentProps } from 'react';
import { cn } from './cn';

/** A key of the keyboard, as it stands on a button or in the help. */
export function Key({ className, ...rest }: ComponentProps<'kbd'>) {
  return (
    <kbd
      className={cn(
        'inline-block rounded-[5px] border border-b-2 border-line bg-sheet px-[5px] font-mono text-[11px]/[1.5] font-medium text-ink-2',
        className,
      )}
      {...rest}
    />
  );
}
