import type { ComponentProps } from 'react';
import { cn } from './cn';

/** A table in a panel: scrolls sideways inside itself when the screen is narrow. */
export function Table({ className, ...rest }: ComponentProps<'table'>) {
  return (
    <div className="overflow-x-auto">
      <table
        className={cn('w-full border-collapse text-left text-[14.5px]', className)}
        {...rest}
      />
    </div>
  );
}
export function Th({ className, scope = 'col', ...rest }: ComponentProps<'th'>) {
  return (
    <th
      scope={scope}
      className={cn(
        'label whitespace-nowrap border-line border-b py-2 pr-4 align-bottom',
        className,
      )}
      {...rest}
    />
  );
}
export function Td({ className, ...rest }: ComponentProps<'td'>) {
  return (
    <td className={cn('border-line-2 border-b py-2.5 pr-4 align-middle', className)} {...rest} />
  );
}
/** A column of figures. */
export const figures = 'text-right tabular-nums';
