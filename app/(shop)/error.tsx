'use client';

import { Button, ButtonLink } from '@/components/ui/button';
import { ErrorState } from '@/components/ui/states';

export default function ShopError({ reset }: { error: Error; reset: () => void }) {
  return (
    <ErrorState
      title="This page could not be shown"
      action={
        <>
          <Button onClick={reset}>Try again</Button>
          <ButtonLink href="/bench">To the bench</ButtonLink>
        </>
      }
    >
      Nothing you entered elsewhere is lost. If it happens again, tell whoever runs this
      installation what you were doing.
    </ErrorState>
  );
}
