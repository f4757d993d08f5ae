import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { molecules } from '../../../../test/support/spring-bodies.js';
import { cumulants, halfLengths, harmonicFrame, springNetwork } from '../disorder/index.js';
import { RehrAlbers, singleScattering } from '../scattering/index.js';
import { PathSignal, PathSum } from '../spectrum/index.js';
import { readStructure } from '../structure/index.js';
import type { Atom, Structure, Vec3 } from '../structure/types.js';
import { EnsembleAverage, planEnsemble, predictEnsemble } from './ensemble.js';
import { EnsembleSurvey, frameSize, packFrame } from './ensemble-frames.js';
import { blockSums } from './ensemble-sums.js';
import { predict } from './predict.js';

const context = { file: 'x.xyz', version: '1' };
const options = { absorber: 'Fe', kMax: 9, radius: 4.2, maxLegs: 3, s02: 0.9, e0: 1 };

const body = molecules.octahedral('Fe', [
  ['C', 1.92],
  ['N', 3.09],
]);
const frameText = (atoms: readonly { element: string; position: Vec3 }[]) =>
  `${atoms.length}\n\n${atoms.map(({ element, position }) => `${element} ${position.join(' ')}`).join('\n')}\n`;
/** Frames of a hexacyanide at 300 K, drawn from its springs; the last part turned and shifted. */
function trajectory(count: number, seed = 3): Structure {
  const model = springNetwork(body, { temperature: 300 });
  const random = seededRandom(seed);
  return readStructure(Array.from({ length: count }, () => frameText(harmonicFrame(model, random))).join(''));
}
const framesOf = (structure: Structure): readonly (readonly Atom[])[] => [structure.atoms, ...structure.moreFrames];
const mapped = (structure: Structure, change: (p: Vec3, frame: number) => Vec3): Structure => {
  const [atoms, ...moreFrames] = framesOf(structure).map((frame, f) =>
    frame.map((atom) => ({ ...atom, position: change(atom.position, f) })),
  );
  return { ...structure, atoms: atoms!, moreFrames };
};
function packed(structure: Structure): Float64Array {
  const size = frameSize(structure);
  const all = framesOf(structure);
  const out = new Float64Array(size * all.length);
  for (const [f, atoms] of all.entries()) packFrame(structure, { atoms }, f + 1, out, f * size);
  return out;
}
function planOf(structure: Structure, exact: boolean, maxLegs = 3) {
  const survey = new EnsembleSurvey(structure, 'Fe', 4.2);
  const frames = packed(structure);
  const size = frameSize(structure);
  for (let f = 0; f < frames.length; f += size) survey.add(frames.subarray(f, f + size));
  return { plan: planEnsemble(survey, { ...options, maxLegs }, { exact }, context), frames };
}

/** Every frame from its own coordinates, route by route, by the kernels of the scattering room: slow and plain. */
function plainAverage({ plan }: ReturnType<typeof planOf>, structure: Structure, k: Float64Array): Float64Array {
  const [signal] = plan.signals;
  const { table, wave, site, paths, kindOfAtom } = signal!;
  const chi = new Float64Array(k.length);
  const re = new Float64Array(table.k.length);
  const im = new Float64Array(table.k.length);
  const all = framesOf(structure);
  for (const frame of all) {
    const multiple = new RehrAlbers(table);
    const at = (vertex: number): Vec3 => frame[site.atoms[vertex]!.source]!.position;
    const signals = paths.flatMap((path) =>
      path.members.map((member) => {
        let length = 0;
        member.forEach((v, i) => {
          const [p, q] = [at(v), at(member[(i + 1) % member.length]!)];
          length += Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
        });
        const spheres = member.map((v) => kindOfAtom[v]!);
        if (path.legs === 2) singleScattering(table, spheres[1]!, length / 2, re, im);
        else multiple.amplitude(member.map(at), spheres, re, im);
        const degeneracy = path.degeneracy / path.members.length;
        return new PathSignal({ ...path, halfLength: length / 2, degeneracy }, table, wave, re, im);
      }),
    );
    const one = new PathSum(signals, wave, k, options.e0, table.k[0]!).sum(
      signals.map(() => ({ sigma2: 0, c3: 0 })),
      options.s02,
      new Float64Array(k.length),
    );
    for (let i = 0; i < k.length; i++) chi[i]! += one[i]! / all.length;
  }
  return chi;
}
const rms = (k: Float64Array, a: Float64Array, b?: Float64Array) =>
  Math.sqrt(k.reduce((sum, ki, i) => sum + (ki < 3 ? 0 : (ki * ki * (a[i]! - (b?.[i] ?? 0))) ** 2), 0));

test('frames that do not move give the prediction of the structure itself', () => {
  const still = readStructure(Array.from({ length: 4 }, () => frameText(body.atoms)).join(''));
  const { chi, ensemble, k } = predictEnsemble(still, options, {}, context);
  const wanted = predict({ ...still, moreFrames: [] }, { ...options, thermal: 'none' }, context).chi;
  // The cubic between nodes 0.04 Å apart: 1e-6; the phase put in and taken out again: rounding.
  expect(rms(k, chi, wanted) / rms(k, wanted)).toBeLessThan(3e-6);
  expect(ensemble).toMatchObject({ frames: 4, multipleScattering: 'exact', expansionError: 0 });
});

test('exact mode is the plain average of frames computed one by one', () => {
  const structure = trajectory(4);
  const all = planOf(structure, true, 4);
  const average = new EnsembleAverage(all.plan);
  average.add(blockSums(all.plan.block, all.frames));
  const chi = average.chi();
  // A spline in k of the average against the average of splines: 1e-4 of χ at the coarse grid's steps.
  expect(rms(average.k, chi, plainAverage(all, structure, average.k)) / rms(average.k, chi)).toBeLessThan(5e-4);
});

test('expanded amplitudes miss the exact average by no more than they say', () => {
  const structure = trajectory(100);
  const [fast, slow] = [false, true].map((exact) => predictEnsemble(structure, options, { exact }, context));
  expect(fast!.ensemble!.multipleScattering).toBe('expanded');
  expect(fast!.ensemble!.testFrames).toBeGreaterThan(3);
  const error = rms(fast!.k, fast!.chi, slow!.chi) / rms(slow!.k, slow!.chi);
  expect(error).toBeGreaterThan(0);
  expect(error).toBeLessThan(1.5 * fast!.ensemble!.expansionError);
  expect(fast!.ensemble!.expansionError).toBeLessThan(1e-4); // 3e-6 here; 4e-4 with one linear term lost
});

test('the same bits wherever blocks are summed, and the cumulants are those of the half lengths', () => {
  const structure = trajectory(100, 5);
  const { plan, frames } = planOf(structure, false);
  const size = frameSize(structure);
  const blocks = [0, 32, 64, 96].map((f) => frames.slice(f * size, Math.min(100, f + 32) * size));
  const there = structuredClone(plan.block); // as a worker gets it
  const sums = [...blocks].reverse().map((block) => blockSums(there, block));
  const results = [blocks.map((block) => blockSums(plan.block, block)), sums.reverse()].map((list) => {
    const average = new EnsembleAverage(plan);
    for (const block of list) average.add(block);
    return average.result(context);
  });
  expect(results[0]!.chi).toEqual(results[1]!.chi);
  expect(results[0]!.ensemble!.chiError).toEqual(results[1]!.ensemble!.chiError);
  // A path of one route: its cumulants by the other way.
  const [signal] = plan.signals;
  const index = signal!.paths.findIndex(({ members }) => members.length === 1);
  const path = signal!.paths[index]!;
  const wanted = cumulants(
    halfLengths(
      framesOf(structure),
      path.vertices.map((v) => signal!.site.atoms[v]!.source),
    ),
  );
  const got = results[0]!.paths[index]!.cumulants!;
  for (const key of ['mean', 'variance', 'third', 'fourth'] as const)
    expectNear(got[key], wanted[key], { rel: 1e-6, abs: 1e-12, label: key });
});

test('χ and variances do not see how a molecule lies, nor on which side of a box an atom is written', () => {
  const structure = trajectory(5, 9);
  const turned = mapped(structure, ([x, y, z], f) => [
    Math.cos(f) * x - Math.sin(f) * y + f,
    Math.sin(f) * x + Math.cos(f) * y - 2 * f,
    z + 0.3,
  ]);
  const exact = { exact: true };
  const [a, b] = [structure, turned].map((s) => predictEnsemble(s, options, exact, context));
  // The mean surroundings come from turned frames: rounding of the turn, 1e-12, on phases of 100 rad.
  expect(rms(a!.k, a!.chi, b!.chi) / rms(a!.k, a!.chi)).toBeLessThan(1e-5);
  const side = 11;
  const cell = { a: side, b: side, c: side, alpha: 90, beta: 90, gamma: 90 };
  const boxed = { ...structure, cell };
  const wrapped = mapped(boxed, (p, f) => p.map((x) => (((x + f) % side) + side) % side) as unknown as Vec3);
  const [c, d] = [boxed, wrapped].map((s) => predictEnsemble(s, options, exact, context));
  expect(rms(c!.k, c!.chi, d!.chi) / rms(c!.k, c!.chi)).toBeLessThan(1e-5);
  expectNear(d!.paths[0]!.cumulants!.variance, c!.paths[0]!.cumulants!.variance, { rel: 1e-6, label: 'variance' });
});

test('an average of harmonic frames has the σ² of the springs it was drawn from, single and multiple scattering', () => {
  const model = springNetwork(body, { temperature: 300 });
  const { paths } = predictEnsemble(trajectory(1500, 13), options, {}, context);
  for (const [label, indices] of [
    ['Fe–C–Fe', [0, 1]],
    ['Fe–N–Fe', [0, 2]],
    ['Fe–C–N–Fe', [0, 1, 2]],
  ] as const) {
    const route = indices.map((atom) => ({ atom, ...body.atoms[atom]! }));
    const own = paths.filter((p) => p.label === label || p.label.startsWith(`${label},`));
    const mean = own.reduce((sum, p) => sum + p.sigma2.thermal, 0) / own.length;
    // Six alike bonds, 1500 frames: √(2/9000) = 1.5 %, four of them; second-order lengthening of straight routes < 2 %.
    expectNear(mean, model.sigma2(route), { rel: 0.08, label });
  }
});

test('bad frames are named by frame and atom', () => {
  const all = trajectory(2);
  const with2 = (atoms: readonly Atom[]): Structure => ({ ...all, moreFrames: [atoms] });
  const second = all.moreFrames[0]!;
  const run = (structure: Structure) => predictEnsemble(structure, options, {}, context);
  expect(() => run(with2(second.slice(1)))).toThrow(/frame 2.*atom 1 is C, in frame 1 it is Fe/);
  expect(() => run(with2(second.slice(0, -1)))).toThrow(/frame 2 has 12 atoms, frame 1 has 13 \(atom 13/);
  expect(() => run(with2(second.map((atom, i) => (i === 4 ? { ...atom, position: [Number.NaN, 0, 0] as const } : atom))))).toThrow(
    /frame 2: atom 5 .* no number/,
  );
  expect(() => run({ ...all, moreFrames: [] })).toThrow(/at least 2 frames, got 1/);
});

test('a stop asked for is obeyed', () => {
  expect(() => predictEnsemble(trajectory(3), options, {}, { ...context, running: { signal: { aborted: true } } })).toThrow('cancelled');
});

test('an electric vector is refused, not dropped', () => {
  expect(() => predictEnsemble(trajectory(3), { ...options, electricVector: [0, 0, 1] }, {}, context)).toThrow('light of all directions');
});
