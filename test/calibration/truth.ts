/**
 * Data whose truth is known, made for one trial. What is unknown to the judge is drawn from what it expects (predict/unknowns.ts), but
 * disorder is an explicit ensemble: displaced copies of the true structure, every route at its own length in every copy,
 *   χ = S0² Σ_j N_j Im[A_j(k) ⟨exp(2ikδ − 2δ(1/R + 1/λ))⟩],      δ: exact change of the half length in a copy,
 * averaged term by term. No Gaussian factor, no cumulant, no σ². Amplitudes A_j are those of the undisplaced site. Å, Å⁻¹, eV.
 */
import { EV_PER_K_SQUARED } from '../../packages/core/src/constants.js';
import { type Reduction, reduce } from '../../packages/core/src/index.js';
import type { TrialSite } from '../../packages/core/src/judgement/trial.js';
import { CubicSpline } from '../../packages/core/src/numerics/spline.js';
import {
  ENERGY_ORIGIN,
  EXTRA_STATIC,
  LN_AMPLITUDE,
  LN_THERMAL_SD,
  lengthSd,
  PATH_CLASSES,
  pathClass,
} from '../../packages/core/src/predict/unknowns.js';
import { transformPlan } from '../../packages/core/src/spectrum/index.js';
import type { Vec3 } from '../../packages/core/src/structure/types.js';
import { type CalibrationSystem, K_GRID_MAX, R_RANGE } from './systems.js';

/** The mean over n frames leaves a noise of 1/√(2n) of the undamped signal, 3 % here: at 150 frames it was the size of the model error. */
const FRAMES = 600;
const STEP = 0.05;
/** Å: model errors are errors of scattering, not of what lies beyond the site. */
const ERROR_REACH = 6;

export interface TruthOptions {
  /** Å: standard deviation of every distance of the candidate. */
  readonly coordinateSd: number;
  /** Part of the rms of the transform in the window. */
  readonly noise: number;
  readonly modelError: number;
  readonly kMax: number;
  /** Å by which the candidate's first shell is too long. */
  readonly overlong?: number;
}

/** One reduced spectrum of a drawn truth. @param normal  the only source of chance */
export function drawTruth(system: CalibrationSystem, options: TruthOptions, normal: () => number): Reduction {
  const { sites } = system.trial.spectra[0]!;
  const kTheory = Float64Array.from({ length: Math.round(16 / STEP) }, (_, i) => STEP * (i + 12));
  const chi = new Float64Array(kTheory.length);
  const thermal = Math.exp((LN_THERMAL_SD * normal()) / 2);
  const frozen = Math.sqrt((EXTRA_STATIC * Math.abs(normal())) / 2);
  const classes = PATH_CLASSES.map(() => normal());
  const errors = coordinateErrors(system, options.coordinateSd, normal);
  const next = system.displacements(normal);
  const frames = Array.from({ length: FRAMES }, () => next().map((u) => thermal * u + frozen * normal()));
  sites.forEach((site, s) => {
    const shorten = -(options.overlong ?? 0);
    addSite(
      site,
      (atom) => system.bodyIndex(s, atom),
      (atom) => errors(s, atom),
      frames,
      classes,
      shorten,
      kTheory,
      chi,
    );
  });
  const s02 = Math.exp(LN_AMPLITUDE.mean + LN_AMPLITUDE.sd * normal());
  const e0 = ENERGY_ORIGIN.mean + ENERGY_ORIGIN.sd * normal();
  const spline = new CubicSpline(kTheory, chi);
  const k = Float64Array.from({ length: Math.round((K_GRID_MAX - 0.5) / STEP) + 1 }, (_, i) => 0.5 + STEP * i);
  const clean = k.map((q) => s02 * spline.at(Math.sqrt(Math.max(q * q - e0 / EV_PER_K_SQUARED, kTheory[0]! ** 2))));
  return asReduction(k, withErrors(k, clean, options, normal));
}

/**
 * Where the true atoms stand against the candidate's, Å. In a molecule every atom is off on its own, so that a distance is off by
 * √2 of an axis; in the crystal, where symmetry holds the absorber, alike atoms are off by the same radial amount.
 */
function coordinateErrors(system: CalibrationSystem, sd: number, normal: () => number): (site: number, atom: number) => Vec3 {
  const drawn = new Map<string, Vec3>();
  const { sites } = system.trial.spectra[0]!;
  return (s, atom) => {
    const key = system.errorKey(s, atom);
    let error = drawn.get(key);
    if (!error) {
      error = [normal(), normal(), normal()];
      drawn.set(key, error);
    }
    if (system.name !== 'crystal') return [0, 1, 2].map((c) => (sd / Math.SQRT2) * error[c]!) as unknown as Vec3;
    const { atoms } = sites[s]!.signal.site;
    if (atom === 0) return [0, 0, 0];
    const { position, distance } = atoms[atom]!;
    return [0, 1, 2].map((c) => (sd * error[0] * (position[c]! - atoms[0]!.position[c]!)) / distance) as unknown as Vec3;
  };
}

function addSite(
  { signal, classes, nearest }: TrialSite,
  bodyIndex: (atom: number) => number,
  errorOf: (atom: number) => Vec3,
  frames: readonly Float64Array[],
  shifts: readonly number[],
  shorten: number,
  kTheory: Float64Array,
  chi: Float64Array,
): void {
  const { site, signals, wave } = signal;
  const nk = kTheory.length;
  const inverseLambda = kTheory.map((k) => 1 / wave.meanFreePath(k));
  const re = new Float64Array(nk);
  const im = new Float64Array(nk);
  const meanRe = new Float64Array(nk);
  const meanIm = new Float64Array(nk);
  const centre = site.atoms[0]!.position;
  const placed = frames.map((u) => {
    const places = new Map<number, Vec3>();
    return (atom: number): Vec3 => {
      let place = places.get(atom);
      if (!place) {
        const { position, distance } = site.atoms[atom]!;
        const b = bodyIndex(atom);
        const factor = nearest.has(atom) ? shorten / distance : 0;
        const off = errorOf(atom);
        place = [0, 1, 2].map(
          (c) => position[c]! + off[c]! + factor * (position[c]! - centre[c]!) + (u[3 * b + c] ?? 0),
        ) as unknown as Vec3;
        places.set(atom, place);
      }
      return place;
    };
  });
  for (const pathSignal of signals) {
    const { path } = pathSignal;
    pathSignal.evaluate(kTheory, re, im);
    meanRe.fill(0);
    meanIm.fill(0);
    const elements = path.vertices.slice(1).map((atom) => site.atoms[atom]!.element);
    const common = shifts[PATH_CLASSES.indexOf(pathClass(path.vertices, classes))]! * lengthSd(path.halfLength, elements);
    for (const members of path.members) {
      for (const place of placed) {
        let length = 0;
        for (let v = 0; v < members.length; v++) length += apart(place(members[v]!), place(members[(v + 1) % members.length]!));
        const delta = length / 2 - path.halfLength + common;
        // exp(2ikδ) by rotation from point to point
        const stepRe = Math.cos(2 * STEP * delta);
        const stepIm = Math.sin(2 * STEP * delta);
        let c = Math.cos(2 * kTheory[0]! * delta);
        let s = Math.sin(2 * kTheory[0]! * delta);
        for (let i = 0; i < nk; i++) {
          const size = 1 - 2 * delta * (1 / path.halfLength + inverseLambda[i]!);
          meanRe[i]! += size * c;
          meanIm[i]! += size * s;
          const turned = c * stepRe - s * stepIm;
          s = c * stepIm + s * stepRe;
          c = turned;
        }
      }
    }
    const weight = (site.weight * path.degeneracy) / (path.members.length * placed.length);
    for (let i = 0; i < nk; i++) chi[i]! += weight * (re[i]! * meanIm[i]! + im[i]! * meanRe[i]!);
  }
}

const apart = (a: Vec3, b: Vec3): number => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

/** White noise, and a model error that is even over R up to ERROR_REACH: both of stated size in the transform of the window. */
function withErrors(k: Float64Array, chi: Float64Array, { noise, modelError, kMax }: TruthOptions, normal: () => number): Float64Array {
  const plan = transformPlan(k, { kWeight: 3, kMin: 3, kMax });
  const rms = (of: Float64Array): number => {
    const re = new Float64Array(plan.R.length);
    const im = new Float64Array(plan.R.length);
    plan.apply(of, re, im);
    let sum = 0;
    let n = 0;
    plan.R.forEach((R, m) => {
      if (R < R_RANGE[0] || R > R_RANGE[1]) return;
      sum += re[m]! ** 2 + im[m]! ** 2;
      n++;
    });
    return Math.sqrt(sum / n);
  };
  const level = rms(chi);
  const white = k.map(() => normal());
  let power = 0;
  for (const w of plan.weight) power += w * w;
  // ε_R² = (dk²/2π) ε_k² Σ (W kⁿ)² a part, two parts
  const whiteRms = Math.sqrt((STEP * STEP * power) / Math.PI);
  const errors = modelErrors(k, normal);
  const errorRms = modelError > 0 ? errors.rms(rms) : 1;
  return chi.map((value, i) => value + ((noise * level) / whiteRms) * white[i]! + ((modelError * level) / errorRms) * errors.values[i]!);
}

function modelErrors(k: Float64Array, normal: () => number): { values: Float64Array; rms: (of: (chi: Float64Array) => number) => number } {
  const waves = Array.from({ length: Math.round(ERROR_REACH / 0.1) }, (_, m) => ({ R: 0.1 * (m + 1), a: normal(), b: normal() }));
  const draw = (terms: typeof waves): Float64Array =>
    k.map((q) => terms.reduce((sum, { R, a, b }) => sum + a * Math.cos(2 * q * R) + b * Math.sin(2 * q * R), 0) / Math.max(q, 2) ** 3);
  return {
    values: draw(waves),
    // the expected size, not that of this draw: the mean square of single waves adds up
    rms: (of) => Math.sqrt(waves.reduce((sum, { R }) => sum + of(draw([{ R, a: 1, b: 0 }])) ** 2 + of(draw([{ R, a: 0, b: 1 }])) ** 2, 0)),
  };
}

function asReduction(k: Float64Array, chi: Float64Array): Reduction {
  return reduce([
    { kind: 'chi', title: 'calibration', columns: {}, guess: '', diagnostics: [], k, chi, lines: Int32Array.from(k, (_, i) => i + 1) },
  ]);
}
