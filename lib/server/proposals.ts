import 'server-only';
import type { Actor, Proposal } from '@/lib/shared/api';
import type { Evidence } from '@/lib/shared/grading/evidence';
import { propose } from '@/lib/shared/grading/propose';
import type { Unit } from '@/models/bench';
import { newestChecks } from './checks';
import { type PeerMeans, peerValues, type Samples, sampleKey } from './results';
import { schemeOf } from './schemes';

/** The grade that a run's results propose, or null while nothing is measured. */
export async function proposalOfRun(
  actor: Actor,
  unit: Unit,
  samples: Samples,
  peers: readonly PeerMeans[],
): Promise<Proposal | null> {
  if (samples.size === 0 || !unit.cameraModel) return null;
  const [scheme, checks] = await Promise.all([
    schemeOf(actor, unit.cameraModel.modelClass),
    newestChecks(actor, unit.id),
  ]);
  const evidence: Evidence = {
    measured: (quantity, zone, edge) =>
      samples.get(sampleKey(quantity, zone, edge))?.repeats ?? null,
    peers: (quantity, zone, edge) => peerValues(peers, sampleKey(quantity, zone, edge)),
    checks: new Map(checks.map((check) => [check.item, check.outcome])),
  };
  return propose(scheme, evidence);
}
