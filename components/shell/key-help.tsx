'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Dialog } from '@/components/ui/dialog';
import { Choice } from '@/components/ui/field';
import { Key } from '@/components/ui/key';
import { type Shortcut, useShortcutRegistry, useShortcuts } from '@/lib/client/shortcuts';

const keyWords: Record<string, string> = {
  ArrowLeft: '←',
  ArrowRight: '→',
  ArrowUp: '↑',
  ArrowDown: '↓',
  ' ': 'Space',
};

/** `?` shows what the keys do on this page, and lets them be switched off (WCAG 2.1.4). */
export function KeyHelp() {
  const registry = useShortcutRegistry();
  const [list, setList] = useState<Shortcut[] | null>(null);
  const show = () => setList(registry.all());
  useShortcuts([{ key: '?', label: 'Show these keys', run: show }]);
  return (
    <>
      <Button
        variant="bare"
        size="small"
        className="max-md:hidden md:justify-between"
        hint="?"
        onClick={show}
      >
        Keys
      </Button>
      <Dialog
        title="Keys on this page"
        open={list !== null}
        onOpenChange={(open) => setList(open ? registry.all() : null)}
      >
        <dl className="grid grid-cols-[auto_1fr] items-baseline gap-x-4 gap-y-2">
          {list?.map((shortcut) => (
            <div key={`${shortcut.key} ${shortcut.label}`} className="contents">
              <dt className="text-right">
                <Key>{keyWords[shortcut.key] ?? shortcut.key}</Key>
              </dt>
              <dd>{shortcut.label}</dd>
            </div>
          ))}
        </dl>
        <div>
          <Choice
            type="checkbox"
            label="Single keys work"
            checked={registry.enabled}
            onChange={(event) => registry.setEnabled(event.target.checked)}
          />
        </div>
      </Dialog>
    </>
  );
}
