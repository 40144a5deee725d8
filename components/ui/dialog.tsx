'use client';

import { Dialog as Radix } from 'radix-ui';
import type { ReactNode } from 'react';
import { cn } from './cn';

/** A question that must be answered first. `trigger` opens it unless `open` is given. */
export function Dialog({
  title,
  description,
  trigger,
  open,
  onOpenChange,
  children,
  wide = false,
}: {
  title: ReactNode;
  description?: ReactNode;
  trigger?: ReactNode;
  open?: boolean;
  onOpenChange?: (open: boolean) => void;
  children: ReactNode;
  wide?: boolean;
}) {
  return (
    <Radix.Root open={open} onOpenChange={onOpenChange}>
      {trigger ? <Radix.Trigger asChild>{trigger}</Radix.Trigger> : null}
      <Radix.Portal>
        <Radix.Overlay className="fixed inset-0 z-40 bg-[#0e0d0c]/55" />
        <Radix.Content
          {...(description ? {} : { 'aria-describedby': undefined })}
          className={cn(
            'fixed top-1/2 left-1/2 z-50 grid max-h-[88dvh] w-[calc(100vw-24px)] -translate-x-1/2 -translate-y-1/2 gap-4 overflow-y-auto rounded-panel bg-sheet p-6 focus:outline-none',
            wide ? 'max-w-[760px]' : 'max-w-[480px]',
          )}
        >
          <div className="flex items-start justify-between gap-4">
            <Radix.Title>{title}</Radix.Title>
            <Radix.Close
              aria-label="Close"
              className="-mt-1.5 -mr-1.5 grid size-8 shrink-0 place-items-center rounded-full text-ink-2 hover:bg-line-2 focus-visible:rounded-full"
            >
              <svg
                aria-hidden="true"
                viewBox="0 0 12 12"
                className="size-3 stroke-current stroke-[1.75]"
              >
                <path d="M1 1 11 11M11 1 1 11" />
              </svg>
            </Radix.Close>
          </div>
          {description ? (
            <Radix.Description className="-mt-2 text-ink-2">{description}</Radix.Description>
          ) : null}
          {children}
        </Radix.Content>
      </Radix.Portal>
    </Radix.Root>
  );
}

/** The row of buttons at a dialog's or form's foot: the primary one last. */
export function Actions({ children, className }: { children: ReactNode; className?: string }) {
  return (
    <div className={cn('flex flex-wrap items-center justify-end gap-2.5', className)}>
      {children}
    </div>
  );
}
