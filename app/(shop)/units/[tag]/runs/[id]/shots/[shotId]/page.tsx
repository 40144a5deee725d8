import type { Metadata } from 'next';
import { ShotView } from '@/components/shots/shot-view';
import { requireActor } from '@/lib/server/session';
import { getShot } from '@/lib/server/shots';
import { read } from '../../../../../../read';

type Props = { params: Promise<{ tag: string; shotId: string }> };

export async function generateMetadata({ params }: Props): Promise<Metadata> {
  return { title: `Shot of ${(await params).tag}` };
}

export default async function ShotPage({ params }: Props) {
  const actor = await requireActor();
  const shot = await read(getShot(actor, (await params).shotId));
  return <ShotView key={shot.id} first={shot} />;
}
