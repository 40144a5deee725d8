import type { Metadata } from 'next';
import { ButtonLink } from '@/components/ui/button';
import { PageHead } from '@/components/ui/panel';
import { UnitList } from '@/components/units/unit-list';
import { searchOf, unitQueryOf } from '@/lib/client/units-path';
import { requireActor } from '@/lib/server/session';
import { listUnits, stateCounts } from '@/lib/server/units';

export const metadata: Metadata = { title: 'Bench' };

export default async function BenchPage({
  searchParams,
}: {
  searchParams: Promise<Record<string, string | string[] | undefined>>;
}) {
  const actor = await requireActor();
  const query = unitQueryOf(await searchParams);
  const [first, counts] = await Promise.all([listUnits(actor, query), stateCounts(actor)]);
  return (
    <>
      <PageHead
        title="Bench"
        actions={
          actor.role === 'grader' ? null : (
            <ButtonLink href="/arrivals#take-in" variant="ink" hint="N">
              Take a camera in
            </ButtonLink>
          )
        }
      />
      <UnitList first={first} firstSearch={searchOf(query)} counts={counts} />
    </>
  );
}
