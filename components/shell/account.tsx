'use client';

import { signOut } from 'next-auth/react';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import type { Actor } from '@/lib/shared/api';
import { KeyHelp } from './key-help';
import { type Theme, ThemeSwitch } from './theme-switch';

/** Who is signed in, and the three things that are the same on every page. */
export function Account({
  actor,
  keepTheme,
}: {
  actor: Pick<Actor, 'name' | 'role' | 'shopName'>;
  keepTheme: (theme: Theme) => Promise<void>;
}) {
  const [leaving, setLeaving] = useState(false);
  const leave = () => {
    setLeaving(true);
    void signOut({ callbackUrl: '/sign-in' });
  };
  return (
    <div className="flex items-center gap-1 md:flex-col md:items-stretch">
      <div className="label min-w-0 px-3 pb-1 max-md:hidden">
        <div className="truncate text-ink">{actor.name}</div>
        <div>{actor.role}</div>
        <div>{actor.shopName}</div>
      </div>
      <ThemeSwitch keep={keepTheme} />
      <KeyHelp />
      <Button
        variant="bare"
        size="small"
        className="whitespace-nowrap md:justify-start"
        busy={leaving}
        onClick={leave}
      >
        Sign out
      </Button>
    </div>
  );
}
