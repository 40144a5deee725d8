import { spawnSync } from 'node:child_process';
import { mkdir, readFile, writeFile } from 'node:fs/promises';
import { cpus } from 'node:os';
import { fileURLToPath } from 'node:url';
import sharp from 'sharp';
import { analyseBytes } from '../analysis/analyse-bytes';
import type { ScenePlan } from '../fixtures/scene/plan';
import { renderScene } from '../fixtures/scene/render';

/**
 * Every target metric of a photograph against sharp decoding the same file to raw pixels, in one run on one machine,
 * and the peak memory of a fresh process against the raw pixels. Prints; asserts nothing.
 */
interface Case {
  name: string;
  plan: ScenePlan;
}

const runs = 5;
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
  snrDb: 36,
  format: { type: 'jpeg', quality: 92, subsampling: '4:2:0' },
  exif: { exposureTime: 1 / 125, fNumber: 5.6, iso: 100, program: 2 },
};
const cases: Case[] = [
  { name: '12 MP', plan: { ...camera, width: 4000, height: 3000, target: '4x3' } },
  { name: '24 MP', plan: { ...camera, width: 6000, height: 4000, target: '3x2' } },
];
const folder = fileURLToPath(new URL('../var/bench/', import.meta.url));

async function picture({ name, plan }: Case): Promise<{ path: string; bytes: Uint8Array }> {
  const path = `${folder}${name.replace(' ', '-').toLowerCase()}.jpg`;
  const cached = await readFile(path).catch(() => null);
  if (cached) return { path, bytes: cached };
  await mkdir(folder, { recursive: true });
  console.log(`Rendering ${name} …`);
  const { bytes } = await renderScene(plan);
  await writeFile(path, bytes);
  return { path, bytes };
}

interface Cost {
  /** Milliseconds that passed, and that processors were at work for this process: the latter a busy machine hardly changes. */
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

function median(costs: Cost[]): Cost {
  const middle = (values: number[]) => values.sort((a, b) => a - b)[values.length >> 1]!;
  return { wall: middle(costs.map((c) => c.wall)), work: middle(costs.map((c) => c.work)) };
}

async function benchSpeed(one: Case): Promise<void> {
  const { bytes } = await picture(one);
  const decode = () => sharp(bytes).raw().toBuffer();
  const stages = new Map<string, Cost[]>();
  const cold = await time(() => analyseBytes(bytes));
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
  const reference = median(decodes);
  const whole = median(analyses);
  console.log(`\n${one.name}, JPEG of ${(bytes.length / 1e6).toFixed(1)} MB, median of ${runs}`);
  const column = (value: number, of: number) =>
    `${value.toFixed(0).padStart(7)} ms ${(value / of).toFixed(2).padStart(5)} ×`;
  const line = (name: string, { wall, work }: Cost) =>
    console.log(
      `  ${name.padEnd(28)}${column(wall, reference.wall)}${column(work, reference.work)}`,
    );
  console.log(`  ${''.padEnd(28)}${'passed'.padStart(10)}${'processor'.padStart(18)}`);
  line('sharp to raw pixels', reference);
  line('analysis, decode included', whole);
  line('analysis, first in process', cold);
  for (const [name, costs] of stages) line(`  ${name}`, median(costs));
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
  for (const one of cases) await benchMemory(one);
}
