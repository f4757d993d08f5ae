/** The curves that show a data set against a candidate, and their bands. Å⁻¹, Å. */
import { normalDeviates } from '../numerics/random.js';
import { transformPlan } from '../spectrum/index.js';
import type { DataVector } from './data-vector.js';
import type { TrialModel } from './trial-model.js';
import type { Band, Comparison } from './types.js';

const DRAWS = 200;
const PRIOR_SEED = 11;
/** Å: how far the transforms are given. */
const R_SHOWN = 6;

/** A way to draw parameter vectors z. */
export type Draw = () => Float64Array;

/** z of the prior: standard normal, half-normal ones folded. */
export function priorDraw({ parameters, bounded }: TrialModel, seed: number = PRIOR_SEED): Draw {
  const normal = normalDeviates(seed);
  return () => Float64Array.from({ length: parameters }, (_, p) => (bounded[p] ? Math.abs(normal()) : normal()));
}

/** Data, best model and prediction of spectrum s, in k and in R. */
export function comparisonOf(vector: DataVector, model: TrialModel, s: number, z: Float64Array, file: string): Comparison {
  const { k, chi, projector, transform } = vector;
  const curve = (at: Float64Array) => projector.apply(model.chi(s, at, new Float64Array(k.length)));
  const best = curve(z);
  const prior = curve(new Float64Array(model.parameters));
  const plan = transformPlan(k, { ...transform, rMax: R_SHOWN });
  const inR = (of: Float64Array) => {
    const real = new Float64Array(plan.R.length);
    const imaginary = new Float64Array(plan.R.length);
    plan.apply(of, real, imaginary);
    return { real, imaginary };
  };
  return { file, k, data: chi, model: best, prior, R: plan.R, dataR: inR(chi), modelR: inR(best), priorR: inR(prior) };
}

/** Σ|d − m|²/Σ|d|² over complex χ(R) in the range. */
export function rFactorOf({ R, dataR, modelR }: Comparison, [from, to]: readonly [number, number]): { misfit: number; power: number } {
  let misfit = 0;
  let power = 0;
  for (let m = 0; m < R.length; m++) {
    if (R[m]! < from - 1e-9 || R[m]! > to + 1e-9) continue;
    misfit += (dataR.real[m]! - modelR.real[m]!) ** 2 + (dataR.imaginary[m]! - modelR.imaginary[m]!) ** 2;
    power += dataR.real[m]! ** 2 + dataR.imaginary[m]! ** 2;
  }
  return { misfit, power };
}

/** Bands of χ(k) and |χ(R)| of spectrum s over draws of z; `middle` is their median. */
export function bandsOf(vector: DataVector, model: TrialModel, s: number, draw: Draw): { k: Band; R: Band } {
  const { k, projector, transform } = vector;
  const plan = transformPlan(k, { ...transform, rMax: R_SHOWN });
  const real = new Float64Array(plan.R.length);
  const imaginary = new Float64Array(plan.R.length);
  const inK: Float64Array[] = [];
  const inR: Float64Array[] = [];
  for (let i = 0; i < DRAWS; i++) {
    const chi = model.chi(s, draw(), new Float64Array(k.length));
    projector.apply(chi, chi);
    plan.apply(chi, real, imaginary);
    inK.push(chi);
    inR.push(real.map((re, m) => Math.hypot(re, imaginary[m]!)));
  }
  return { k: quantileBand(inK), R: quantileBand(inR) };
}

function quantileBand(draws: readonly Float64Array[]): Band {
  const n = draws[0]!.length;
  const room = () => new Float64Array(n);
  const band = { low95: room(), low68: room(), middle: room(), high68: room(), high95: room() };
  const column = new Float64Array(draws.length);
  const at = (part: number): number => {
    const position = part * (column.length - 1);
    const i = Math.floor(position);
    return column[i]! + (position - i) * ((column[i + 1] ?? column[i]!) - column[i]!);
  };
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < draws.length; j++) column[j] = draws[j]![i]!;
    column.sort();
    band.low95[i] = at(0.025);
    band.low68[i] = at(0.16);
    band.middle[i] = at(0.5);
    band.high68[i] = at(0.84);
    band.high95[i] = at(0.975);
  }
  return band;
}
