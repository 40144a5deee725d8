import type { Metadata } from 'next';
import { PageHead, Panel, PanelHead } from '@/components/ui/panel';
import { ReceivedList } from '@/components/units/received-list';
import { TakeInForm } from '@/components/units/take-in-form';
import { may } from '@/lib/server/access';
import { listModels } from '@/lib/server/models';
import { requireActor } from '@/lib/server/session';
import { listUnits } from '@/lib/server/units';
import { unitQuerySchema } from '@/lib/shared/schemas';

export const metadata: Metadata = { title: 'Arrivals' };

const received = unitQuerySchema.parse({
  state: 'received',
  sort: 'received',
  order: 'asc',
  pageSize: 100,
});

const waiting = (count: number) =>
  count === 0 ? 'No camera waits' : count === 1 ? 'One camera waits' : `${count} cameras wait`;

export default async function ArrivalsPage() {
  const actor = await requireActor();
  const [units, models] = await Promise.all([listUnits(actor, received), listModels(actor)]);
  const takesIn = may(actor, 'unit.create');
  return (
    <>
      <PageHead title="Arrivals" />
      <div className="grid items-start gap-3.5 lg:grid-cols-2">
        <Panel aria-label="Waiting for the bench">
          <PanelHead title={waiting(units.total)} aside="for the bench, longest first" />
          <ReceivedList units={units.rows} now={Date.now()} />
        </Panel>
        {takesIn ? (
          <Panel id="take-in" aria-label="Take a camera in">
            <PanelHead title="Take a camera in" aside="it gets its tag by itself" />
            <TakeInForm models={models} currency={actor.currency} />
          </Panel>
        ) : null}
      </div>
    </>
  );
}
