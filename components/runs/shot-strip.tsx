import Image from 'next/image';
import Link from 'next/link';
import { Progress } from '@/components/ui/progress';
import type { ShotRow } from '@/lib/shared/api';

const kindWords: Partial<Record<NonNullable<ShotRow['kind']>, string>> = {
  target: 'Target',
  scene: 'Scene',
};

/** The run's shots in the order they came; each opens. */
export function ShotStrip({ tag, runId, shots }: { tag: string; runId: string; shots: ShotRow[] }) {
  return (
    <ol className="grid grid-cols-[repeat(auto-fill,minmax(112px,1fr))] gap-2.5">
      {shots.map((shot) => (
        <li key={shot.id}>
          <Link
            href={`/units/${tag}/runs/${runId}/shots/${shot.id}`}
            className="block no-underline focus-visible:rounded-well"
          >
            <ShotPicture shot={shot} />
            <span className="mt-1.5 block text-[12.5px] leading-tight">
              <b className="block truncate">{titleOf(shot)}</b>
              <span className="block text-ink-2">{lineOf(shot)}</span>
            </span>
          </Link>
        </li>
      ))}
    </ol>
  );
}

function ShotPicture({ shot }: { shot: ShotRow }) {
  const waiting = shot.state === 'queued' || shot.state === 'analysing';
  return (
    <span className="relative block aspect-4/3 overflow-hidden rounded-well bg-well">
      {shot.thumbnail ? (
        <Image
          src={shot.thumbnail}
          alt=""
          width={320}
          height={240}
          unoptimized
          className="size-full object-cover"
        />
      ) : null}
      {waiting ? (
        <span className="absolute inset-x-2.5 bottom-2.5">
          <Progress quiet value={shot.progress} label={`${shot.name}: ${lineOf(shot)}`} />
        </span>
      ) : null}
      {shot.state === 'failed' ? (
        <svg
          viewBox="-12 -12 24 24"
          aria-hidden="true"
          className="absolute inset-0 m-auto size-10 overflow-visible"
        >
          <circle r={9} fill="none" stroke="#ff8a57" strokeWidth={3} />
        </svg>
      ) : null}
    </span>
  );
}

const titleOf = (shot: ShotRow) => (shot.kind && kindWords[shot.kind]) || shot.name;

function lineOf(shot: ShotRow): string {
  if (shot.state === 'queued') return 'waits for its turn';
  if (shot.state === 'analysing') return 'being measured';
  if (shot.state === 'failed') return 'not measured: open to see why';
  return shot.headline ?? 'measured';
}
