'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Actions, Dialog } from '@/components/ui/dialog';
import { Choice, Textarea } from '@/components/ui/field';
import type { UnitDetail } from '@/lib/shared/api';
import { type UnitState, unitStateWords } from '@/lib/shared/words';

/** The other ways a unit can go, with a note that its timeline keeps. */
export function MoveDialog({
  unit,
  busy,
  onMove,
}: {
  unit: UnitDetail;
  busy: boolean;
  onMove: (to: UnitState, note?: string) => void;
}) {
  const [open, setOpen] = useState(false);
  const [to, setTo] = useState<UnitState | null>(null);
  const [note, setNote] = useState('');
  if (unit.may.moveTo.length === 0) return null;
  const move = () => {
    if (!to) return;
    onMove(to, note.trim() === '' ? undefined : note.trim());
    setOpen(false);
    setTo(null);
    setNote('');
  };
  return (
    <Dialog
      title={`Move ${unit.tag}`}
      description="The move stands in the unit’s timeline with your name."
      open={open}
      onOpenChange={setOpen}
      trigger={
        <Button variant="bare" size="small">
          Move elsewhere…
        </Button>
      }
    >
      <fieldset className="flex flex-wrap gap-2">
        <legend className="sr-only">Move to</legend>
        {unit.may.moveTo.map((state) => (
          <Choice
            key={state}
            name="to"
            label={unitStateWords[state]}
            checked={to === state}
            onChange={() => setTo(state)}
          />
        ))}
      </fieldset>
      <Textarea
        label="Why"
        note="optional"
        rows={2}
        maxLength={500}
        value={note}
        onChange={(event) => setNote(event.target.value)}
      />
      <Actions>
        <Button
          variant={to === 'scrapped' ? 'light' : 'ink'}
          disabled={!to}
          busy={busy}
          onClick={move}
        >
          {to === 'scrapped' ? 'Scrap it for good' : 'Move it'}
        </Button>
      </Actions>
    </Dialog>
  );
}
