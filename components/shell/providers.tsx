'use client';

import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { type ReactNode, useState } from 'react';
import { ToastProvider } from '@/components/ui/toast';
import { ShortcutProvider } from '@/lib/client/shortcuts';

const makeClient = () =>
  new QueryClient({
    defaultOptions: { queries: { staleTime: 15_000, retry: 1 }, mutations: { retry: false } },
  });

export function Providers({ children }: { children: ReactNode }) {
  const [client] = useState(makeClient);
  return (
    <QueryClientProvider client={client}>
      <ToastProvider>
        <ShortcutProvider>{children}</ShortcutProvider>
      </ToastProvider>
    </QueryClientProvider>
  );
}
