'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Tag } from '@/components/ui/chip';
import { FormError, Select } from '@/components/ui/field';
import { Panel, PanelHead } from '@/components/ui/panel';
import { Moment } from '@/components/units/moment';
import { call, sentenceOf } from '@/lib/client/api';
import { bytes } from '@/lib/client/format';
import { useChange } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { ShotDetail, ShotRow } from '@/lib/shared/api';

const kinds = [
  ['auto', 'find out what it is'],
  ['target', 'the target'],
  ['scene', 'a free scene'],
] as const;

/** Every analysis that was made; a new one adds to them and replaces nothing. */
export function AnalysesPanel({ shot }: { shot: ShotDetail }) {
  const [kind, setKind] = useState<string>('auto');
  const again = useChange(
    () => call<ShotRow>(`/api/shots/${shot.id}/analyse`, 'POST', { kind }),
    ['shot', 'run'],
  );
  const working = shot.state === 'queued' || shot.state === 'analysing';
  const go = () => {
    if (!working && !again.isPending) again.mutate(undefined);
  };
  useShortcuts([{ key: 'a', label: 'Analyse again', run: go }]);
  return (
    <Panel aria-label="Analyses">
      <PanelHead
        title={shot.analyses.length === 1 ? 'One analysis' : `${shot.analyses.length} analyses`}
      />
      <ol className="mb-4 grid gap-1">
        {shot.analyses.map(({ id, version, at }, i) => (
          <li key={id} className="flex flex-wrap justify-between gap-x-3">
            <span>
              Measuring code <Tag>{version}</Tag>
              {i === 0 ? ', shown here' : ''}
            </span>
            <span className="label">
              <Moment at={at} />
            </span>
          </li>
        ))}
      </ol>
      <div className="flex flex-wrap items-end gap-2.5">
        <Select
          label="Take it for"
          fieldClass="min-w-44 flex-1"
          value={kind}
          onChange={(event) => setKind(event.target.value)}
        >
          {kinds.map(([value, word]) => (
            <option key={value} value={value}>
              {word}
            </option>
          ))}
        </Select>
        <Button variant="quiet" hint="A" busy={working || again.isPending} onClick={go}>
          {working ? 'Being measured' : 'Analyse again'}
        </Button>
      </div>
      <FormError>{again.isError ? sentenceOf(again.error) : null}</FormError>
      <p className="label mt-4 break-all">
        Original: {bytes(shot.bytes)}, SHA-256{' '}
        <Tag className="whitespace-normal">{shot.sha256}</Tag>
      </p>
    </Panel>
  );
}
