// Averages over frames for a site of 60 atoms without symmetry: single scattering, multiple scattering expanded and exact, and every
// frame from nothing (site, potential, phase shifts, paths). `npx vitest bench --run ensemble`; one iteration is the frames named.
import { afterAll, bench, describe } from 'vitest';
import { EnsembleAverage, planEnsemble } from '../../packages/core/src/predict/ensemble.js';
import { EnsembleSurvey, frameSize } from '../../packages/core/src/predict/ensemble-frames.js';
import { blockSums } from '../../packages/core/src/predict/ensemble-sums.js';
import { predict } from '../../packages/core/src/predict/predict.js';
import type { Atom, Structure, Vec3 } from '../../packages/core/src/structure/types.js';
import { seededRandom } from '../support/random.js';

const random = seededRandom(41);
const gauss = () => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
/** Iron amid 59 light atoms on a lattice of 2.4 Å, each moved by up to 0.25 Å along each axis: about 40 of them within 5 Å. */
function irregularSite(): Structure {
  const atoms: Atom[] = [];
  for (let n = 0; n < 60; n++) {
    const lattice = [n % 4, Math.floor(n / 4) % 4, Math.floor(n / 16)];
    const isCentre = n === 21;
    const element = isCentre ? 'Fe' : 'CNOS'.charAt(n % 7 === 0 ? 3 : n % 3);
    const position = lattice.map((x) => 2.4 * x + 0.5 * (random() - 0.5)) as unknown as Vec3;
    atoms.push({ element, name: `${element}${n}`, position, occupancy: 1 });
  }
  const identity = { rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1], translation: [0, 0, 0] as const, text: 'x,y,z' };
  return { format: 'xyz', title: 'invented', atoms, moreFrames: [], operators: [identity], diagnostics: [] };
}
const first = irregularSite();
/** Every atom about its place, 0.05 Å along each axis. */
const frame = (): Float64Array => Float64Array.from(first.atoms.flatMap(({ position }) => position.map((x) => x + 0.05 * gauss())));
const FRAMES = 128;
const size = frameSize(first);
const frames = new Float64Array(size * FRAMES);
const options = { absorber: 'Fe', radius: 5, kMax: 15 };
const context = { file: '', version: '' };
const survey = new EnsembleSurvey(first, 'Fe', 5);
for (let f = 0; f < FRAMES; f++) {
  const one = frame();
  frames.set(one, f * size);
  survey.add(one);
}
const single = planEnsemble(survey, { ...options, maxLegs: 2 }, {}, context);
const started = performance.now();
const multiple = planEnsemble(survey, options, {}, context);
const routes = multiple.block.sites.reduce((sum, { groups }) => sum + groups.reduce((n, { weights }) => n + weights.length, 0), 0);
console.log(
  `${first.atoms.length} atoms, ${routes} routes; plan ${((performance.now() - started) / 1000).toFixed(1)} s; expansion off by ${(100 * multiple.expansionError).toFixed(3)} % rms of k²χ in single frames`,
);
const exact = planEnsemble(survey, options, { exact: true }, context);
let sink = 0; // a result nobody looks at may be optimised away
afterAll(() => {
  if (!(sink !== 0)) throw new Error('nothing was computed');
});
const once = { iterations: 1, warmupIterations: 0, warmupTime: 0, time: 0 };

describe('ensemble, one core', () => {
  for (const [name, plan] of [
    ['single scattering', single],
    ['multiple scattering, expanded', multiple],
  ] as const)
    bench(
      `${name}, ${FRAMES} frames`,
      () => {
        const average = new EnsembleAverage(plan);
        for (let f = 0; f < FRAMES; f += 32) average.add(blockSums(plan.block, frames.subarray(f * size, (f + 32) * size)));
        sink += average.frames;
      },
      { iterations: 5, warmupIterations: 1, time: 0 },
    );
  bench(
    'multiple scattering, exact, 2 frames',
    () => {
      sink += blockSums(exact.block, frames.subarray(0, 2 * size)).frames;
    },
    once,
  );
  bench(
    'from nothing, 1 frame',
    () => {
      const at = (i: number): Vec3 => [frames[3 * i]!, frames[3 * i + 1]!, frames[3 * i + 2]!];
      const moved = { ...first, atoms: first.atoms.map((atom, i) => ({ ...atom, position: at(i) })) };
      sink += predict(moved, { ...options, thermal: 'none' }, context).chi.length;
    },
    once,
  );
});
