'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Actions, Dialog } from '@/components/ui/dialog';
import { FormError, Textarea } from '@/components/ui/field';
import { useToast } from '@/components/ui/toast';
import { ApiError, call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import type { UnitDetail } from '@/lib/shared/api';
import type { Letter } from '@/lib/shared/words';
import { letterWords } from './letter-words';

/** The last look before a name stands under a grade; another letter than the proposed one needs its reason. */
export function SignDialog({
  unit,
  letter,
  proposed,
  open,
  onOpenChange,
  onSigned,
}: {
  unit: UnitDetail;
  letter: Letter;
  proposed: Letter;
  open: boolean;
  onOpenChange: (open: boolean) => void;
  onSigned: () => void;
}) {
  const say = useToast();
  const [reason, setReason] = useState('');
  const [missing, setMissing] = useState(false);
  const overrides = letter !== proposed;
  const sign = useChange(
    () =>
      call<UnitDetail>(`/api/units/${unit.tag}/grade`, 'POST', {
        letter,
        reason: reason.trim() === '' ? undefined : reason.trim(),
      }),
    ['unit', 'units', 'grading'],
  );
  const go = () => {
    if (overrides && reason.trim() === '') return setMissing(true);
    sign.mutate(undefined, {
      onSuccess: () => {
        say(`${unit.tag} is signed: ${letterWords[letter]}.`);
        onSigned();
      },
    });
  };
  const refused = sign.error instanceof ApiError ? sign.error.fields.reason : undefined;
  return (
    <Dialog
      title={`Sign ${letterWords[letter]} for ${unit.tag}`}
      description="It stands with your name, the rules and the measurements as they are now."
      open={open}
      onOpenChange={onOpenChange}
    >
      {overrides ? (
        <Textarea
          label={`Why ${letterWords[letter]} and not ${letterWords[proposed]}`}
          hint="The buyer reads this sentence in the report."
          rows={3}
          maxLength={1000}
          value={reason}
          error={
            refused ??
            (missing ? 'Give the reason for another grade than the proposed one.' : undefined)
          }
          onChange={(event) => {
            setReason(event.target.value);
            setMissing(false);
          }}
        />
      ) : null}
      <FormError>{sign.isError ? sentenceOf(sign.error) : null}</FormError>
      <Actions>
        <Button variant="quiet" onClick={() => onOpenChange(false)}>
          Not yet
        </Button>
        <Button busy={sign.isPending} onClick={go} autoFocus={!overrides}>
          Sign {letterWords[letter]}
        </Button>
      </Actions>
    </Dialog>
  );
}
