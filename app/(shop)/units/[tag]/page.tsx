import type { Metadata } from 'next';
import { UnitView } from '@/components/units/unit-view';
import { requireActor } from '@/lib/server/session';
import { getUnit } from '@/lib/server/units';
import { read } from '../../read';

type Props = { params: Promise<{ tag: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: (await params).tag };
}

export default async function UnitPage({ params }: Props) {
  const actor = await requireActor();
  const unit = await read(getUnit(actor, (await params).tag));
  return <UnitView key={unit.tag} first={unit} currency={actor.currency} />;
}
