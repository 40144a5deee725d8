'use client';

import { Tabs as Radix } from 'radix-ui';
import type { ReactNode } from 'react';

/** Views of one thing on one page, moved through with the arrow keys. */
export function Tabs({
  label,
  tabs,
  defaultValue,
}: {
  label: string;
  tabs: { value: string; label: ReactNode; content: ReactNode }[];
  defaultValue?: string;
}) {
  return (
    <Radix.Root defaultValue={defaultValue ?? tabs[0]?.value}>
      <Radix.List aria-label={label} className="mb-4 flex flex-wrap gap-1.5">
        {tabs.map((tab) => (
          <Radix.Trigger
            key={tab.value}
            value={tab.value}
            className="min-h-9 rounded-full px-3.5 py-1 text-[14px] text-ink-2 hover:text-ink focus-visible:rounded-full data-[state=active]:bg-ink data-[state=active]:font-semibold data-[state=active]:text-sheet"
          >
            {tab.label}
          </Radix.Trigger>
        ))}
      </Radix.List>
      {tabs.map((tab) => (
        <Radix.Content key={tab.value} value={tab.value} className="focus-visible:rounded-well">
          {tab.content}
        </Radix.Content>
      ))}
    </Radix.Root>
  );
}
