'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { GradeDial } from '@/components/pictures/grade-dial';
import { Button, ButtonLink } from '@/components/ui/button';
import { Choice } from '@/components/ui/field';
import { Panel } from '@/components/ui/panel';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { Proposal, UnitDetail } from '@/lib/shared/api';
import { type Letter, letters } from '@/lib/shared/words';
import { letterWords } from './letter-words';
import { PublishPanel } from './publish-panel';
import { SignDialog } from './sign-dialog';

const letterKeys: Record<Letter, string> = { A: 'a', B: 'b', C: 'c', Parts: 'x' };

/** Where the second person decides: the proposal, another letter with a reason, or back to the bench. */
export function SignPanel({ unit, proposal }: { unit: UnitDetail; proposal: Proposal | null }) {
  const router = useRouter();
  const [chosen, setChosen] = useState<Letter | null>(null);
  const [signing, setSigning] = useState(false);
  const letter = chosen ?? proposal?.letter ?? null;
  const open = unit.may.sign && proposal !== null;
  useShortcuts(
    open
      ? [
          ...letters.map((name) => ({
            key: letterKeys[name],
            label: `Grade it ${letterWords[name]}`,
            run: () => setChosen(name),
          })),
          { key: 's', label: 'Sign', run: () => setSigning(true) },
        ]
      : [],
  );
  return (
    <Panel aria-label="Decision" className="grid gap-4">
      <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
        <GradeDial
          letter={unit.gradeSigned?.letter ?? letter}
          rules={proposal?.rules ?? []}
          size={190}
        />
        <p className="min-w-[180px] flex-1 text-[17px] text-pretty leading-snug">
          {proposal?.sentence ??
            'Nothing is measured in a run after the repair, so nothing is proposed.'}
        </p>
      </div>
      {open && letter ? (
        <>
          <fieldset className="flex flex-wrap gap-2">
            <legend className="sr-only">Grade</legend>
            {letters.map((name) => (
              <Choice
                key={name}
                name="letter"
                label={letterWords[name]}
                checked={letter === name}
                onChange={() => setChosen(name)}
              />
            ))}
          </fieldset>
          <div className="flex flex-wrap gap-2.5">
            <Button size="bench" hint="S" onClick={() => setSigning(true)}>
              {letter === proposal.letter
                ? `Sign ${letterWords[letter]}`
                : `Override to ${letterWords[letter]}`}
            </Button>
            <ButtonLink href={`/units/${unit.tag}`} size="bench">
              The unit
            </ButtonLink>
          </div>
          <SignDialog
            key={letter}
            unit={unit}
            letter={letter}
            proposed={proposal.letter}
            open={signing}
            onOpenChange={setSigning}
            onSigned={() => {
              setSigning(false);
              router.refresh();
            }}
          />
        </>
      ) : (
        <PublishPanel unit={unit} />
      )}
    </Panel>
  );
}
