'use client';

import { type KeyboardEvent, useRef, useState } from 'react';
import { Panel, PanelHead } from '@/components/ui/panel';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import type { UnitDetail } from '@/lib/shared/api';
import { type CheckOutcome, functionCheckItems } from '@/lib/shared/words';
import { CheckRow } from './check-row';

type Views = UnitDetail['checks'];
const keyOutcomes: Record<string, CheckOutcome> = { p: 'pass', f: 'fail', n: 'not-fitted' };

/** What the hand can try, item by item. In the list: arrows move, P, F and N mark and move on. */
export function ChecksPanel({ unit }: { unit: UnitDetail }) {
  const [failing, setFailing] = useState<string | null>(null);
  const [pending, setPending] = useState<Record<string, CheckOutcome>>({});
  const rows = useRef(new Map<string, HTMLElement>());
  const views = new Map(unit.checks.map((check) => [check.item, check]));
  const save = useChange(
    (check: { item: string; outcome: CheckOutcome; note?: string }) =>
      call<Views>(`/api/units/${unit.tag}/checks`, 'PUT', { checks: [check] }),
    ['unit'],
  );
  const focus = (index: number) => {
    const item = functionCheckItems[Math.min(functionCheckItems.length - 1, Math.max(0, index))];
    if (item) rows.current.get(item.id)?.focus();
  };
  const put = (item: string, outcome: CheckOutcome, note?: string) => {
    setFailing(null);
    setPending((all) => ({ ...all, [item]: outcome }));
    save.mutate(
      { item, outcome, note },
      {
        onSettled: () => setPending(({ [item]: _, ...rest }) => rest),
      },
    );
  };
  const mark = (index: number, item: string, outcome: CheckOutcome) => {
    if (outcome === 'fail') return setFailing(item);
    put(item, outcome);
    focus(index + 1);
  };
  const press = (event: KeyboardEvent, index: number, item: string) => {
    if (event.target !== event.currentTarget || event.ctrlKey || event.metaKey) return;
    const outcome = keyOutcomes[event.key];
    const step = { ArrowDown: 1, ArrowUp: -1 }[event.key];
    if (!outcome && !step) return;
    event.preventDefault();
    if (step) focus(index + step);
    else if (outcome) mark(index, item, outcome);
  };
  const done = functionCheckItems.filter(({ id }) => views.has(id)).length;
  const failed = unit.checks.filter((check) => check.outcome === 'fail').length;
  return (
    <Panel aria-label="Function checks">
      <PanelHead
        title={headline(done, failed)}
        aside={unit.may.check ? 'in the list: P pass, F fail, N not fitted' : undefined}
      />
      <ol>
        {functionCheckItems.map(({ id, label }, index) => (
          <CheckRow
            key={id}
            ref={(element) => {
              if (element) rows.current.set(id, element);
            }}
            label={label}
            check={views.get(id) ?? null}
            outcome={pending[id] ?? views.get(id)?.outcome ?? null}
            editable={unit.may.check}
            first={index === 0}
            failing={failing === id}
            onKeyDown={(event) => press(event, index, id)}
            onMark={(outcome) => mark(index, id, outcome)}
            onFail={(note) => {
              put(id, 'fail', note);
              focus(index + 1);
            }}
            onLeave={() => setFailing(null)}
          />
        ))}
      </ol>
      {save.isError ? (
        <p role="alert" className="mt-3 font-medium text-light-ink">
          {sentenceOf(save.error)}
        </p>
      ) : null}
    </Panel>
  );
}

function headline(done: number, failed: number): string {
  if (done === 0) return 'Functions not checked yet';
  if (failed > 0) return failed === 1 ? 'One function fails' : `${failed} functions fail`;
  if (done < functionCheckItems.length)
    return `${done} of ${functionCheckItems.length} functions checked`;
  return 'Every function checked';
}
