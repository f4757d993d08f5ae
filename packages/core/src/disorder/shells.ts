/**
 * Static disorder, read off the geometry. Every path is summed at its own length; this is the table that says what
 * spread they have. Paths of like scatterers whose half lengths lie within the resolution π/(2Δk) of one another form a
 * shell; its moments are those of the mixture of the members' own distributions. Å, Å², Å³, Å⁻¹.
 */
import { InputError } from '../errors.js';

/** What a path brings to a shell. */
export interface ShellPath {
  /** What must be alike to share a shell: the scatterer's element, or a chain of elements. */
  readonly element: string;
  /** Å. */
  readonly halfLength: number;
  /** Routes it stands for, times any weight of its site; > 0. */
  readonly degeneracy: number;
  /** Thermal σ² of the half length, Å². */
  readonly thermal: number;
  /** Third cumulant of its own, Å³; default 0. */
  readonly thirdCumulant?: number;
}

export interface Shell {
  readonly element: string;
  /** Indices into the paths given. */
  readonly members: readonly number[];
  /** Sum of the degeneracies, N. */
  readonly count: number;
  /** Degeneracy-weighted mean half length, Å. */
  readonly meanDistance: number;
  readonly shortest: number;
  readonly longest: number;
  /** Å²; total = thermal + static exactly (variance of a mixture). */
  readonly sigma2: { readonly thermal: number; readonly static: number; readonly total: number };
  /** Third cumulant of the whole mixture, Å³. */
  readonly thirdCumulant: number;
}

/** π/(2Δk), Å: two distances closer than this do not make two peaks. @throws {RangeError} Δk not > 0 */
export function distanceResolution(kMin: number, kMax: number): number {
  if (!(kMin >= 0 && kMax > kMin && kMax < Infinity))
    throw new RangeError(`distanceResolution: wants 0 ≤ kMin < kMax in Å⁻¹, got ${kMin} … ${kMax}`);
  return Math.PI / (2 * (kMax - kMin));
}

/**
 * Groups of like scatterers within the resolution, shortest first.
 *
 * Complete-linkage merging: neighbouring groups join, closest first, as long as the joint group spans no more than the
 * resolution. Chaining would let a dense radial distribution run together without end; cutting from the shortest up
 * would split tight shells.
 *
 * @param resolution Å, ≥ 0
 * @throws {InputError} a path with a length, degeneracy or σ² that cannot be
 */
export function groupShells(paths: readonly ShellPath[], resolution: number): Shell[] {
  if (!(resolution >= 0)) throw new RangeError(`groupShells: resolution must be ≥ 0 Å, got ${resolution}`);
  const byElement = new Map<string, number[]>();
  for (const [index, path] of paths.entries()) {
    checkPath(path, index);
    const list = byElement.get(path.element);
    if (list) list.push(index);
    else byElement.set(path.element, [index]);
  }
  const shells: Shell[] = [];
  for (const [element, indices] of byElement) {
    indices.sort((a, b) => paths[a]!.halfLength - paths[b]!.halfLength || a - b);
    for (const members of mergeWithin(indices, paths, resolution)) shells.push(summarise(element, members, paths));
  }
  return shells.sort((a, b) => a.meanDistance - b.meanDistance || (a.element < b.element ? -1 : 1));
}

function checkPath(path: ShellPath, index: number): void {
  if (!(path.halfLength > 0 && path.halfLength < Infinity))
    throw new InputError(`groupShells: path ${index} (${path.element}) needs a half length > 0 Å, got ${path.halfLength}`);
  if (!(path.degeneracy > 0 && path.degeneracy < Infinity))
    throw new InputError(`groupShells: path ${index} (${path.element}) needs a degeneracy > 0, got ${path.degeneracy}`);
  if (!(path.thermal >= 0 && path.thermal < Infinity))
    throw new InputError(`groupShells: path ${index} (${path.element}) needs a thermal σ² ≥ 0 Å², got ${path.thermal}`);
}

function mergeWithin(sorted: readonly number[], paths: readonly ShellPath[], resolution: number): number[][] {
  const groups = sorted.map((index) => [index]);
  const lengthOf = (index: number) => paths[index]!.halfLength;
  for (;;) {
    let best = -1;
    let bestSpan = resolution * (1 + 1e-12);
    for (let i = 0; i + 1 < groups.length; i++) {
      const span = lengthOf(groups[i + 1]!.at(-1)!) - lengthOf(groups[i]![0]!);
      if (span <= bestSpan && (best < 0 || span < bestSpan)) {
        best = i;
        bestSpan = span;
      }
    }
    if (best < 0) return groups;
    groups.splice(best, 2, [...groups[best]!, ...groups[best + 1]!]);
  }
}

function summarise(element: string, members: readonly number[], paths: readonly ShellPath[]): Shell {
  const of = members.map((index) => paths[index]!);
  const count = of.reduce((sum, p) => sum + p.degeneracy, 0);
  const mean = (value: (p: ShellPath) => number) => of.reduce((sum, p) => sum + p.degeneracy * value(p), 0) / count;
  const meanDistance = mean((p) => p.halfLength);
  const thermal = mean((p) => p.thermal);
  const spread = mean((p) => (p.halfLength - meanDistance) ** 2);
  const thirdCumulant = mean((p) => {
    const d = p.halfLength - meanDistance;
    return d * d * d + 3 * d * p.thermal + (p.thirdCumulant ?? 0);
  });
  return {
    element,
    members,
    count,
    meanDistance,
    shortest: of[0]!.halfLength,
    longest: of.at(-1)!.halfLength,
    sigma2: { thermal, static: spread, total: thermal + spread },
    thirdCumulant,
  };
}

/** Amplitude (Å, before N/kR²) and phase beyond 2kR (rad) of a scatterer at k; from the real scattering where it is at hand. */
export type ShellSignal = (k: number, halfLength: number) => { readonly amplitude: number; readonly phase: number };

/**
 * What one shell with one σ² would hide: rms over k of k³χ of (explicit sum − one Gaussian shell of the same N, mean R
 * and total σ²), relative to the rms of the explicit sum.
 *
 * χ = Σ N F(k) / (kR²) exp(−2σ²k²) sin(2kR + φ). Without a `signal` F = 1 and φ = 0: the plain sine model, which weighs
 * the high k more than a real scatterer, so an upper estimate; say which was used.
 *
 * @param paths the members' paths, as given to groupShells
 */
export function hiddenByOneShell(
  shell: Shell,
  paths: readonly ShellPath[],
  { kMin, kMax, signal }: { readonly kMin: number; readonly kMax: number; readonly signal?: ShellSignal },
): number {
  distanceResolution(kMin, kMax);
  const steps = Math.max(2, Math.ceil((kMax - kMin) / 0.05));
  let difference = 0;
  let whole = 0;
  const wave = (k: number, R: number, count: number, sigma2: number) => {
    const { amplitude, phase } = signal ? signal(k, R) : { amplitude: 1, phase: 0 };
    return ((count * amplitude * k * k) / (R * R)) * Math.exp(-2 * sigma2 * k * k) * Math.sin(2 * k * R + phase);
  };
  for (let i = 0; i <= steps; i++) {
    const k = kMin + ((kMax - kMin) * i) / steps;
    let explicit = 0;
    for (const index of shell.members) {
      const p = paths[index]!;
      explicit += wave(k, p.halfLength, p.degeneracy, p.thermal);
    }
    const d = explicit - wave(k, shell.meanDistance, shell.count, shell.sigma2.total);
    difference += d * d;
    whole += explicit * explicit;
  }
  return whole === 0 ? 0 : Math.sqrt(difference / whole);
}
