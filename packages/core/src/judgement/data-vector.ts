/**
 * The data vector: as many independent numbers as a window in k and R holds, and how well each is known.
 *
 * T takes χ(k), its background removed, to the N complex points of the windowed, kⁿ-weighted transform in the R range, real and imaginary
 * parts as 2N rows. With σ the standard deviation of χ on its grid, T diag(σ) = U S Vᵀ; the leading n = N_idp = 2 Δk ΔR/π directions (the window's
 * Slepian-like modes: Slepian & Pollak, Bell Syst. Tech. J. 40, 43 (1961)) are the data vector
 *
 *   y = Uᵀ T χ,   noise of y_i: s_i, independent of one another
 *
 * so that a sum over them is chi-squared in fact and not only in the mean, which Σ|d − m|² over all N correlated points is not. A
 * model error of η rms|d| at every R puts f² = η² |y|²/n on each direction: ε_i² = s_i² + f², and
 *
 *   X_data = (N_idp/n) Σ (y_i − m_i)²/ε_i²,        mean N_idp for the right structure.
 *
 * A prediction passes the background removal of the data first; χ(k) that came ready passes it as well, since nobody knows what was
 * removed from it. Å, Å⁻¹.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { InputError } from '../errors.js';
import { type BackgroundProjector, backgroundProjector, type Reduction } from '../evidence/index.js';
import { informationContent, type TransformSettings, transformPlan } from '../spectrum/index.js';

/** Fewest independent points a judgement is given for. */
const FEWEST_POINTS = 4;

export interface DataWindow {
  readonly kRange: readonly [number, number];
  readonly rRange: readonly [number, number];
  readonly kWeight: number;
}

export interface DataVector {
  readonly window: DataWindow;
  /** N_idp, not rounded. */
  readonly independentPoints: number;
  /** Length n of the vector. */
  readonly size: number;
  /** Å⁻¹, grid of the data (nk). */
  readonly k: Float64Array;
  /** The data as the comparison sees them (nk). */
  readonly chi: Float64Array;
  /** Whitened data, y_i √(N_idp/n)/ε_i (n). */
  readonly data: Float64Array;
  /** Rows that take a predicted χ(k) to the whitened vector, background removal included, row-major (n, nk). */
  readonly rows: Float64Array;
  /** Standard deviation of the noise alone over that with the model error, (n): 1 where noise rules. */
  readonly noisePart: Float64Array;
  /** Of the real or imaginary part of the transform. */
  readonly epsilonR: number;
  readonly epsilonK: number;
  /** η rms|χ(R)|/√2 per part: what the model error adds. */
  readonly floorR: number;
  readonly transform: TransformSettings;
  /** Removes from a prediction what the reduction removed from the data. */
  readonly projector: BackgroundProjector;
}

/**
 * @param modelError  η
 * @throws {InputError} window outside the data, fewer than four independent points, data that do not oscillate
 */
export function dataVector(reduction: Reduction, window: DataWindow, modelError: number, file: string): DataVector {
  const { k, chi } = reduction;
  const nk = k.length;
  const { kRange, rRange, kWeight } = window;
  checkWindow(reduction, window, file);
  const { independentPoints } = informationContent(kRange, rRange);
  const transform: TransformSettings = { kWeight, kMin: kRange[0], kMax: kRange[1] };
  const plan = transformPlan(k, transform);
  const used = Array.from(plan.R.keys()).filter((m) => plan.R[m]! >= rRange[0] - 1e-9 && plan.R[m]! <= rRange[1] + 1e-9);
  const direct = transformRows(plan.weight, k, plan.R, used);
  const projector = projectorOf(reduction, rRange[0]);
  const T = projectedRows(direct, projector, nk);
  const n = Math.round(independentPoints);
  const { directions, values } = leadingDirections(T, noiseShape(reduction, plan.weight), nk, n);

  // what came from a reduction has passed the removal of the background already
  const isReady = reduction.background.coefficients === 0;
  const seen = isReady ? projector.apply(chi) : chi;
  const y = multiply(directions, multiply(direct, seen, nk), direct.length / nk);
  let power = 0;
  for (const value of y) power += value * value;
  const floor2 = (modelError * modelError * power) / n;
  const scale = Math.sqrt(independentPoints / n);
  const inverse = values.map((s) => scale / Math.sqrt(s * s + floor2));

  const rows = new Float64Array(n * nk);
  for (let i = 0; i < n; i++) {
    for (let a = 0; a < used.length * 2; a++) {
      const u = directions[i * 2 * used.length + a]! * inverse[i]!;
      for (let j = 0; j < nk; j++) rows[i * nk + j]! += u * T[a * nk + j]!;
    }
  }
  const perPoint = power / used.length;
  return {
    window,
    independentPoints,
    size: n,
    k,
    chi: seen,
    data: y.map((value, i) => value * inverse[i]!),
    rows,
    noisePart: values.map((s) => s / Math.sqrt(s * s + floor2)),
    epsilonR: reduction.noise.epsilonR * noiseScale(reduction, plan.weight),
    epsilonK: reduction.noise.epsilonK,
    floorR: modelError * Math.sqrt(perPoint / 2),
    transform,
    projector,
  };
}

/** Whitened vector of a predicted χ(k) (nk) into out (n). */
export function project({ rows, size, k }: DataVector, chi: Float64Array, out: Float64Array): Float64Array {
  const nk = k.length;
  for (let i = 0; i < size; i++) {
    let sum = 0;
    const base = i * nk;
    for (let j = 0; j < nk; j++) sum += rows[base + j]! * chi[j]!;
    out[i] = sum;
  }
  return out;
}

function checkWindow({ k, chi }: Reduction, { kRange, rRange, kWeight }: DataWindow, file: string): void {
  const [from, to] = [k[0]!, k.at(-1)!];
  if (!(kRange[0] >= 0 && kRange[1] > kRange[0]))
    throw new InputError(`${file}: the k range must rise from 0 or more, got ${kRange.join(' to ')} Å⁻¹`);
  if (kRange[0] < from - 0.026 || kRange[1] > to + 0.026)
    throw new InputError(
      `${file}: the k range ${kRange[0]} to ${kRange[1]} Å⁻¹ must lie inside the data, which run from ${from.toFixed(2)} to ${to.toFixed(2)} Å⁻¹`,
    );
  if (!(rRange[0] >= 0 && rRange[1] > rRange[0]))
    throw new InputError(`${file}: the R range must rise from 0 or more, got ${rRange.join(' to ')} Å`);
  if (!(kWeight >= 0 && kWeight <= 5)) throw new InputError(`${file}: the k weight must lie between 0 and 5, got ${kWeight}`);
  const { independentPoints } = informationContent(kRange, rRange);
  if (independentPoints < FEWEST_POINTS)
    throw new InputError(
      `${file}: k ${kRange.join(' to ')} Å⁻¹ and R ${rRange.join(' to ')} Å hold ${independentPoints.toFixed(1)} independent points; at least ${FEWEST_POINTS} are needed to judge anything: widen a range`,
    );
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < k.length; i++) {
    if (k[i]! < kRange[0] || k[i]! > kRange[1]) continue;
    low = Math.min(low, chi[i]!);
    high = Math.max(high, chi[i]!);
  }
  if (!(high > low))
    throw new InputError(`${file}: chi(k) does not oscillate: it is ${low} throughout the k range; measured data are needed`);
}

/** T, row-major (2 · points, nk): F(R) = dk/√π Σ W kⁿ χ e^{2ikR}. */
function transformRows(weight: Float64Array, k: Float64Array, R: Float64Array, used: readonly number[]): Float64Array {
  const nk = k.length;
  const scale = (k[1]! - k[0]!) / Math.sqrt(Math.PI);
  const T = new Float64Array(2 * used.length * nk);
  used.forEach((m, row) => {
    for (let i = 0; i < nk; i++) {
      T[2 * row * nk + i] = scale * weight[i]! * Math.cos(2 * k[i]! * R[m]!);
      T[(2 * row + 1) * nk + i] = scale * weight[i]! * Math.sin(2 * k[i]! * R[m]!);
    }
  });
  return T;
}

/** ε_R the noise estimate would give in this window over the one it was stated for. */
function noiseScale({ k, noise }: Reduction, weight: Float64Array): number {
  const dk = k[1]! - k[0]!;
  let sum = 0;
  for (const w of weight) sum += w * w;
  return (noise.epsilonK * Math.sqrt((dk * dk * sum) / (2 * Math.PI))) / noise.epsilonR;
}

/** Standard deviation of χ on the grid: its course as the points tell it, its size so that the transform has the noise that was found. */
function noiseShape({ k, sigmaChi, noise }: Reduction, weight: Float64Array): Float64Array {
  let shaped = 0;
  let flat = 0;
  for (let i = 0; i < k.length; i++) {
    const w2 = weight[i]! ** 2;
    const s = sigmaChi[i]!;
    if (Number.isFinite(s)) shaped += w2 * s * s;
    flat += w2;
  }
  if (!(shaped > 0)) return k.map(() => noise.epsilonK);
  const level = noise.epsilonK * Math.sqrt(flat / shaped);
  return sigmaChi.map((s) => (Number.isFinite(s) ? s * level : noise.epsilonK));
}

/** The n leading left singular directions of T diag(σ), as rows Uᵀ (n, rows of T), and their singular values. */
function leadingDirections(T: Float64Array, sigma: Float64Array, nk: number, n: number) {
  const rows = T.length / nk;
  const gram = new Matrix(rows, rows);
  for (let a = 0; a < rows; a++) {
    for (let b = 0; b <= a; b++) {
      let sum = 0;
      for (let i = 0; i < nk; i++) sum += T[a * nk + i]! * T[b * nk + i]! * sigma[i]! * sigma[i]!;
      gram.set(a, b, sum);
      gram.set(b, a, sum);
    }
  }
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(gram, { assumeSymmetric: true });
  const order = Array.from(realEigenvalues.keys()).sort((a, b) => realEigenvalues[b]! - realEigenvalues[a]!);
  const directions = new Float64Array(n * rows);
  const values = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const column = order[i]!;
    values[i] = Math.sqrt(Math.max(0, realEigenvalues[column]!));
    for (let a = 0; a < rows; a++) directions[i * rows + a] = eigenvectorMatrix.get(a, column);
  }
  return { directions, values };
}

/** Rows (m, columns) times a vector. */
function multiply(rows: Float64Array, vector: Float64Array, columns: number): Float64Array {
  const out = new Float64Array(rows.length / columns);
  for (let i = 0; i < out.length; i++) for (let j = 0; j < columns; j++) out[i]! += rows[i * columns + j]! * vector[j]!;
  return out;
}

function projectorOf({ k, background }: Reduction, rLow: number): BackgroundProjector {
  if (background.coefficients === 0) return backgroundProjector(k, { rLow: Math.min(1, Math.max(0.6, rLow)) });
  return backgroundProjector(k, { rLow: background.rLow, kWeight: background.kWeight, kMax: background.kMax });
}

/** Rows · P, column by column of P. */
function projectedRows(rows: Float64Array, projector: BackgroundProjector, nk: number): Float64Array {
  const n = rows.length / nk;
  const out = new Float64Array(rows.length);
  const unit = new Float64Array(nk);
  const column = new Float64Array(nk);
  for (let j = 0; j < nk; j++) {
    unit.fill(0);
    unit[j] = 1;
    projector.apply(unit, column);
    for (let i = 0; i < n; i++) {
      let sum = 0;
      for (let l = 0; l < nk; l++) sum += rows[i * nk + l]! * column[l]!;
      out[i * nk + j] = sum;
    }
  }
  return out;
}
