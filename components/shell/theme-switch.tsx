'use client';

import { useEffect, useState } from 'react';
import { Button } from '@/components/ui/button';
import { useShortcuts } from '@/lib/client/shortcuts';

export type Theme = 'daylight' | 'safelight';

/** Daylight or safelight; `keep` remembers it, so that the next page is sent in it. */
export function ThemeSwitch({ keep }: { keep: (theme: Theme) => Promise<void> }) {
  const [theme, setTheme] = useState<Theme>('daylight');
  useEffect(() => {
    if (document.documentElement.dataset.theme === 'safelight') setTheme('safelight');
  }, []);
  const other = theme === 'daylight' ? 'safelight' : 'daylight';
  const turn = () => {
    document.documentElement.dataset.theme = other;
    setTheme(other);
    void keep(other);
  };
  useShortcuts([{ key: 't', label: 'Switch between daylight and safelight', run: turn }]);
  return (
    <Button variant="bare" size="small" className="md:justify-between" hint="T" onClick={turn}>
      {other === 'safelight' ? 'Safelight' : 'Daylight'}
    </Button>
  );
}
