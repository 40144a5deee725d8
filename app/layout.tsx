import type { Metadata, Viewport } from 'next';
import { cookies, headers } from 'next/headers';
import type { ReactNode } from 'react';
import { StyleNonce } from '@/components/public/style-nonce';
import './globals.css';

export const metadata: Metadata = {
  title: { default: 'Mendlight', template: '%s · Mendlight' },
  description: 'Proof that a repaired camera takes a good picture.',
};
export const viewport: Viewport = { width: 'device-width', initialScale: 1 };

/** The cookie keeps how this browser is lit, so that the first byte already is; reading the nonce makes every page dynamic. */
export default async function RootLayout({ children }: { children: ReactNode }) {
  const theme = (await cookies()).get('theme')?.value === 'safelight' ? 'safelight' : 'daylight';
  const nonce = (await headers()).get('x-nonce') ?? undefined;
  return (
    <html lang="en" data-theme={theme} suppressHydrationWarning>
      <head>
        <link
          rel="preload"
          href="/fonts/archivo-latin-5.3.0.woff2"
          as="font"
          type="font/woff2"
          crossOrigin="anonymous"
        />
      </head>
      <body>
        <StyleNonce nonce={nonce} />
        {children}
      </body>
    </html>
  );
}
