/** Small invented sites and spectra for tests of the judgement. */
import type { MeasuredScan, Reduction, Structure } from '../../packages/core/src/index.js';
import { predict, readStructure, reduce } from '../../packages/core/src/index.js';
import { normalDeviates } from '../../packages/core/src/numerics/random.js';

/** An invented Fe(S–C)₄ site, 0.1 Å out of symmetry; extra distance in Å for every bond. */
export function redoxinLike(lengthen = 0): Structure {
  const lines: string[] = [];
  const corners = [
    [1, 1, 1],
    [-1, -1, 1],
    [-1, 1, -1],
    [1, -1, -1],
  ] as const;
  corners.forEach((corner, i) => {
    const unit = corner.map((x) => x / Math.sqrt(3));
    const s = unit.map((x) => x * (2.28 + 0.02 * i + lengthen));
    const side = [unit[1]!, -unit[0]!, 0].map((x) => x / Math.hypot(unit[0]!, unit[1]!));
    const c = s.map((x, a) => x + 0.6 * unit[a]! + 1.7 * side[a]!);
    lines.push(`S ${s.map((x) => x.toFixed(4)).join(' ')}`, `C ${c.map((x) => x.toFixed(4)).join(' ')}`);
  });
  return readStructure(`${lines.length + 1}\ninvented\nFe 0 0 0\n${lines.join('\n')}\n`);
}

/** χ(k) of a structure with given energy origin and S0², and white noise, as a ready scan. */
export function inventedScan(
  structure: Structure,
  { e0 = 3, s02 = 0.82, noise = 0.0005, seed = 1, kMax = 13, temperature = 10, absorber = 'Fe' } = {},
): MeasuredScan {
  const options = { absorber, thermal: 'springs', temperature, e0, s02, kMax, radius: 4.5 } as const;
  const { k, chi } = predict(structure, options, { file: 'truth', version: '' });
  const normal = normalDeviates(seed);
  const first = k.findIndex((value) => value >= 0.5);
  return {
    kind: 'chi',
    title: 'invented',
    columns: {},
    guess: '',
    diagnostics: [],
    k: k.slice(first),
    chi: chi.slice(first).map((value) => value + noise * normal()),
    lines: Int32Array.from(k.slice(first), (_, i) => i + 1),
  };
}

export const inventedReduction = (structure: Structure, options?: Parameters<typeof inventedScan>[1]): Reduction =>
  reduce([inventedScan(structure, options)]);

/** Kolmogorov's distance between draws and a distribution (both given as probabilities below), and its 1 % limit for n draws. */
export function kolmogorov(probabilities: readonly number[]): { distance: number; limit: number } {
  const sorted = [...probabilities].sort((a, b) => a - b);
  const n = sorted.length;
  const distance = Math.max(...sorted.map((p, i) => Math.max((i + 1) / n - p, p - i / n)));
  return { distance, limit: 1.628 / Math.sqrt(n) };
}
