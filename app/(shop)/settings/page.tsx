import type { Metadata } from 'next';
import { PeoplePanel } from '@/components/settings/people-panel';
import { SessionsPanel } from '@/components/settings/sessions-panel';
import { ShopPanel } from '@/components/settings/shop-panel';
import { PageHead } from '@/components/ui/panel';
import { may } from '@/lib/server/access';
import { listPeople } from '@/lib/server/members';
import { requireActor } from '@/lib/server/session';
import { listSessions } from '@/lib/server/sessions';
import { shopSettings } from '@/lib/server/shop';

export const metadata: Metadata = { title: 'Settings' };

export default async function SettingsPage() {
  const actor = await requireActor();
  const [shop, people, sessions] = await Promise.all([
    may(actor, 'shop.edit') ? shopSettings(actor) : null,
    may(actor, 'member.read') ? listPeople(actor) : null,
    listSessions(actor),
  ]);
  return (
    <>
      <PageHead title="Settings" label={`${actor.name}, ${actor.role}, ${actor.email}`} />
      <div className="grid items-start gap-3.5 lg:grid-cols-2">
        <div className="grid gap-3.5">
          {shop ? <ShopPanel name={shop.name} signOwnWork={shop.signOwnWork} /> : null}
          <SessionsPanel first={sessions} />
        </div>
        {people ? <PeoplePanel first={people} email={actor.email} /> : null}
      </div>
    </>
  );
}
