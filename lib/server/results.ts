import 'server-only';
import { Op } from 'sequelize';
import { quantities } from '@/analysis/quantities';
import type { Edge } from '@/analysis/result';
import { combineRepeats, type Repeat } from '@/analysis/statistics/combine';
import type { Actor, RunResult } from '@/lib/shared/api';
import { placeWords } from '@/lib/shared/places';
import type { Unit } from '@/models/bench';
import type { Measurement } from '@/models/testing';
import { inShop } from './access';
import { db } from './db';

/** One quantity at one place over the target photographs of a run. */
export interface Sample {
  name: string;
  zone: string | null;
  edge: Edge | null;
  unit: string;
  repeats: readonly Repeat[];
}
export type Samples = ReadonlyMap<string, Sample>;

/** Means of one other unit of the model. */
export type PeerMeans = ReadonlyMap<string, number>;

export const sampleKey = (name: string, zone: string | null, edge: string | null) =>
  `${name}|${zone ?? ''}|${edge ?? ''}`;

/** What a run's target photographs show, from the latest analysis of each. */
export async function resultsOfRun(actor: Actor, runId: string): Promise<Samples> {
  return resultsOfAnalyses(actor, await analysisIds(actor, [runId]));
}

export async function resultsOfAnalyses(actor: Actor, ids: string[]): Promise<Samples> {
  return samplesOf(await measurementsOf(actor, ids));
}

/** Latest analyses of the target photographs of some runs. */
export async function analysisIds(actor: Actor, runIds: readonly string[]): Promise<string[]> {
  const shots = await db().Shot.findAll({
    attributes: ['latestAnalysisId'],
    where: inShop(actor, {
      runId: { [Op.in]: [...runIds] },
      kind: 'target',
      latestAnalysisId: { [Op.ne]: null },
    }),
  });
  return shots.flatMap((shot) => shot.latestAnalysisId ?? []);
}

type Row = Pick<
  Measurement,
  'unitId' | 'name' | 'zone' | 'edge' | 'unit' | 'value' | 'uncertainty'
>;

/** Plain rows: a run and its peers have thousands. */
async function measurementsOf(actor: Actor, ids: string[]): Promise<Row[]> {
  if (ids.length === 0) return [];
  return db().Measurement.findAll({
    attributes: ['unitId', 'name', 'zone', 'edge', 'unit', 'value', 'uncertainty'],
    where: inShop(actor, { analysisId: { [Op.in]: ids } }),
    raw: true,
  });
}

function samplesOf(rows: readonly Row[]): Samples {
  const samples = new Map<string, Sample & { repeats: Repeat[] }>();
  for (const { name, zone, edge, unit, value, uncertainty } of rows) {
    const key = sampleKey(name, zone, edge);
    const sample = samples.get(key) ?? {
      name,
      zone: zone || null,
      edge: edge || null,
      unit,
      repeats: [],
    };
    samples.set(key, sample);
    sample.repeats.push({ value, uncertainty });
  }
  return samples;
}

/** Means of the newest run after repair of every other unit of the model in the shop. */
export async function peersOf(actor: Actor, unit: Unit): Promise<PeerMeans[]> {
  const units = await db().Unit.findAll({
    attributes: ['id'],
    where: inShop(actor, { modelId: unit.modelId, id: { [Op.ne]: unit.id } }),
  });
  const runs = await db().Run.findAll({
    where: inShop(actor, { unitId: { [Op.in]: units.map(({ id }) => id) }, phase: 'after' }),
    order: [['startedAt', 'ASC']],
  });
  const newest = new Map(runs.map((run) => [run.unitId, run.id]));
  const ids = await analysisIds(actor, [...newest.values()]);
  const rows = await measurementsOf(actor, ids);
  return [...newest.keys()]
    .map((unitId) => means(samplesOf(rows.filter((row) => row.unitId === unitId))))
    .filter((unitMeans) => unitMeans.size > 0);
}

const means = (samples: Samples): PeerMeans =>
  new Map([...samples].map(([key, sample]) => [key, combineRepeats(sample.repeats).mean]));

export function peerValues(peers: readonly PeerMeans[], key: string): number[] {
  return peers.flatMap((unit) => unit.get(key) ?? []);
}

/** Mean, doubt and peers of each quantity, in the order of the list of quantities. */
export function withPeers(samples: Samples, peers: readonly PeerMeans[]): RunResult[] {
  const order = [...quantities.keys()];
  return [...samples]
    .map(([key, sample]) => runResult(sample, peerValues(peers, key)))
    .toSorted((a, b) => order.indexOf(a.name) - order.indexOf(b.name));
}

function runResult(sample: Sample, peers: number[]): RunResult {
  const { name, zone, edge, unit } = sample;
  const { mean, standardUncertainty, expanded, n } = combineRepeats(sample.repeats);
  return {
    name,
    zone,
    edge,
    label: labelOf(sample),
    unit,
    mean,
    standardUncertainty,
    expanded,
    n,
    peers,
  };
}

/** "Sharpness, lower right (vertical edges)". */
export function labelOf({ name, zone, edge }: Pick<Sample, 'name' | 'zone' | 'edge'>): string {
  const label = quantities.get(name)?.label ?? name;
  const place = zone ? `, ${placeWords[zone] ?? zone}` : '';
  return `${label}${place}${edge ? ` (${edge} edges)` : ''}`;
}
