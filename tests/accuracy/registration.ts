import { decode } from '../../analysis/decode.ts';
import { registerTarget } from '../../analysis/target/register.ts';
import { renderScene } from '../../fixtures/scene/render.ts';
import { allFrames, drawScene } from '../analysis/target/registration-scenes.ts';

// How far registration is off, over seeded scenes: `node --import tsx tests/accuracy/registration.ts [scenes] [first seed]`
const scenes = Number(process.argv[2] ?? 200);
const first = Number(process.argv[3] ?? 1);
const ringErrors: number[] = [];
const deviations: number[] = [];
const milliseconds: number[] = [];
let missed = 0;

for (let seed = first; seed < first + scenes; seed++) {
  const plan = drawScene(seed, allFrames);
  const { bytes, truth } = await renderScene(plan);
  const { frame } = await decode(bytes);
  const started = process.cpuUsage();
  try {
    const found = registerTarget(frame);
    const used = process.cpuUsage(started);
    milliseconds.push((used.user + used.system) / 1000);
    let worst = found.target.name === plan.target ? 0 : Number.POSITIVE_INFINITY;
    for (const [id, [x, y]] of Object.entries(truth.rings)) {
      const ring = found.summary.rings[id]!;
      worst = Math.max(worst, Math.hypot(ring[0] - x, ring[1] - y));
    }
    ringErrors.push(worst);
    const { corner, uncertainty } = found.distortion;
    deviations.push(Math.abs(corner - truth.distortionCorner) / uncertainty);
    if (worst > 0.2) console.log(`${worst.toFixed(3)} px: ${JSON.stringify(plan)}`);
  } catch (error) {
    missed++;
    console.log(`not found (${String(error)}): ${JSON.stringify(plan)}`);
  }
}

const share = (values: number[], p: number) =>
  values.toSorted((a, b) => a - b)[Math.min(values.length - 1, Math.floor(p * values.length))]!;
const within = deviations.filter((deviation) => deviation <= 2).length / deviations.length;
console.log(`scenes ${scenes}, not found ${missed}`);
console.log(
  `worst ring of a scene, px: median ${share(ringErrors, 0.5).toFixed(3)}, 95 % ${share(ringErrors, 0.95).toFixed(3)}, largest ${Math.max(...ringErrors).toFixed(3)} (allowed 0.3)`,
);
console.log(`distortion within 2 u: ${(100 * within).toFixed(1)} %`);
console.log(`processor time, ms: median ${share(milliseconds, 0.5).toFixed(0)}`);
