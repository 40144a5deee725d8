'use server';

import { cookies } from 'next/headers';
import type { Theme } from '@/components/shell/theme-switch';

const year = 365 * 24 * 60 * 60;

/** Remembers how this browser is lit. */
export async function keepTheme(theme: Theme): Promise<void> {
  const value: Theme = theme === 'safelight' ? 'safelight' : 'daylight';
  (await cookies()).set('theme', value, { path: '/', sameSite: 'lax', maxAge: year });
}
