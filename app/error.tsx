'use client';

import { Notice } from '@/components/public/notice';
import { Button, ButtonLink } from '@/components/ui/button';

export default function PageError({ reset }: { error: Error; reset: () => void }) {
  return (
    <Notice
      title="This page could not be shown"
      action={
        <>
          <Button onClick={reset}>Try again</Button>
          <ButtonLink href="/">To the start</ButtonLink>
        </>
      }
    >
      Something went wrong on our side; nothing you entered elsewhere is lost.
    </Notice>
  );
}
