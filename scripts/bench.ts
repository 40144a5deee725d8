import { spawnSync } from 'node:child_process';
import { mkdir, readFile, writeFile } from 'node:fs/promises';
import { cpus, loadavg } from 'node:os';
import { fileURLToPath } from 'node:url';
import sharp from 'sharp';
import { analyseBytes } from '../analysis/analyse-bytes';
import type { ScenePlan } from '../fixtures/scene/plan';
import { renderScene } from '../fixtures/scene/render';

/**
 * Every target metric of a photograph against sharp decoding the same file to raw pixels, in one run on one machine,
 * and the peak memory of a fresh process against the raw pixels. Prints; asserts nothing.
 * "Work" is the time of processors for this process, which a busy machine changes less than the time that passed.
 */
interface Case {
  name: string;
  plan: ScenePlan;
}

/** Until the just-in-time compiler has done its work: a worker measures twelve photographs of a session one after another. */
const warmUp = 4;
const runs = 7;
const camera: ScenePlan = {
  fill: 0.95,
  rotationDegrees: 0.6,
  tiltYDegrees: 1,
  distortionCornerPercent: -1.5,
  redScalePermille: 0.3,
  blueScalePermille: -0.2,
  blurSigma: { centre: 0.7, corner: 1.1 },
  toneContrast: 1.15,
  shadingCornerEv: -0.3,
  // Base sensitivity: common practice, no source.
  snrDb: 34,
  exif: { exposureTime: 1 / 125, fNumber: 5.6, iso: 100, program: 2 },
};
/** A finer JPEG is slower to decode, so that the coarser one is the harder case. */
const fine = { type: 'jpeg', quality: 97, subsampling: '4:2:0' } as const;
const normal = { type: 'jpeg', quality: 92, subsampling: '4:2:0' } as const;
const small = { ...camera, width: 4000, height: 3000, target: '4x3' } as const;
const large = { ...camera, width: 6000, height: 4000, target: '3x2' } as const;
const cases: Case[] = [
  { name: '12 MP quality 97', plan: { ...small, format: fine } },
  { name: '12 MP quality 92', plan: { ...small, format: normal } },
  { name: '24 MP quality 97', plan: { ...large, format: fine } },
];
const folder = fileURLToPath(new URL('../var/bench/', import.meta.url));

async function picture({ name, plan }: Case): Promise<{ path: string; bytes: Uint8Array }> {
  const path = `${folder}${name.replaceAll(' ', '-').toLowerCase()}.jpg`;
  const cached = await readFile(path).catch(() => null);
  if (cached) return { path, bytes: cached };
  await mkdir(folder, { recursive: true });
  console.log(`Rendering ${name} …`);
  const { bytes } = await renderScene(plan);
  await writeFile(path, bytes);
  return { path, bytes };
}

interface Cost {
  /** Milliseconds that passed, and that processors were at work for this process. */
  wall: number;
  work: number;
}

function clock(): () => Cost {
  const start = performance.now();
  const before = process.cpuUsage();
  return () => {
    const { user, system } = process.cpuUsage(before);
    return { wall: performance.now() - start, work: (user + system) / 1000 };
  };
}

async function time(work: () => Promise<unknown>): Promise<Cost> {
  const stop = clock();
  await work();
  return stop();
}

function at(share: number, costs: Cost[]): Cost {
  const pick = (values: number[]) =>
    values.sort((a, b) => a - b)[Math.floor(share * (values.length - 1))]!;
  return { wall: pick(costs.map((c) => c.wall)), work: pick(costs.map((c) => c.work)) };
}

async function benchSpeed(one: Case): Promise<void> {
  const { bytes } = await picture(one);
  const decode = () => sharp(bytes).raw().toBuffer();
  const cold = await time(() => analyseBytes(bytes));
  for (let run = 0; run < warmUp; run++) await analyseBytes(bytes);
  const stages = new Map<string, Cost[]>();
  const decodes: Cost[] = [];
  const analyses: Cost[] = [];
  // In turns, so that a busy moment of the machine falls on both.
  for (let run = 0; run < runs; run++) {
    decodes.push(await time(decode));
    let stop = clock();
    const onStage = (name: string, milliseconds: number) => {
      stages.set(name, [...(stages.get(name) ?? []), { wall: milliseconds, work: stop().work }]);
      stop = clock();
    };
    analyses.push(await time(() => analyseBytes(bytes, { onStage })));
  }
  const load = loadavg()[0]!.toFixed(1);
  console.log(
    `\n${one.name}, JPEG of ${(bytes.length / 1e6).toFixed(1)} MB, ${runs} runs after ${warmUp + 1}, load ${load}`,
  );
  console.log(
    `  ${''.padEnd(26)}${['least work', 'least passed', 'median work', 'median passed'].map((head) => head.padStart(17)).join('')}`,
  );
  const references = [at(0, decodes), at(0.5, decodes)];
  const line = (name: string, costs: Cost[]) => {
    const cells = references.flatMap((reference, i) => {
      const cost = at(i / 2, costs);
      return [cell(cost.work, reference.work), cell(cost.wall, reference.wall)];
    });
    console.log(`  ${name.padEnd(26)}${cells.join('')}`);
  };
  line('sharp to raw pixels', decodes);
  line('analysis, decode included', analyses);
  line('analysis, first of this size', [cold]);
  for (const [name, costs] of stages) line(`  ${name}`, costs);
}

function cell(milliseconds: number, reference: number): string {
  return `${milliseconds.toFixed(0).padStart(7)} ms${(milliseconds / reference).toFixed(2).padStart(5)} ×`;
}

/** In a process of its own, so that nothing else counts. */
async function benchMemory(one: Case): Promise<void> {
  const { path } = await picture(one);
  const { width = 0, height = 0 } = one.plan;
  const raw = (width * height * 3) / 1e6;
  const script = fileURLToPath(import.meta.url);
  const child = spawnSync(process.execPath, ['--import', 'tsx', script, '--memory', path], {
    encoding: 'utf8',
  });
  const peak = Number(child.stdout);
  if (!(peak > 0)) throw new Error(child.stderr);
  const allowed = 4 * raw + 150;
  console.log(
    `\n${one.name}: peak resident memory ${peak.toFixed(0)} MB; raw RGB pixels ${raw.toFixed(0)} MB; allowed 4 × raw + 150 = ${allowed.toFixed(0)} MB`,
  );
}

const [flag, file] = process.argv.slice(2);
if (flag === '--memory' && file) {
  await analyseBytes(await readFile(file));
  process.stdout.write(String((process.resourceUsage().maxRSS * 1024) / 1e6));
} else {
  console.log(`${cpus().length} cores, Node ${process.version}`);
  for (const one of cases) await benchSpeed(one);
  await benchMemory(cases.at(-1)!);
}
