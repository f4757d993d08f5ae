/**
 * The parameters of a judgement. Each is carried as z, its distance from the expected value in standard deviations of its prior,
 * so that X_prior = Σ z² and every parameter has the same scale; half-normal ones have z ≥ 0.
 */
import { CLASS_NAMES, type EnergyOrigin, EXTRA_STATIC, LN_AMPLITUDE, LN_THERMAL_SD, type PathClass } from '../predict/unknowns.js';

export interface Parameter {
  /** Unique: parameters of one key are one. */
  readonly key: string;
  readonly name: string;
  /** What it belongs to, in words; '' for a whole spectrum. */
  readonly shell: string;
  readonly unit: string;
  readonly isHalfNormal: boolean;
  /** Class of the scatterer a shift belongs to. */
  readonly shellClass?: PathClass;
  /** Of the prior, in the parameter's own unit. */
  readonly mean: number;
  readonly sd: number;
  /** z to the parameter's own value, and its derivative. */
  readonly value: (z: number) => number;
  readonly slope: (z: number) => number;
}

const linear = (mean: number, sd: number) => ({ mean, sd, value: (z: number) => mean + sd * z, slope: () => sd });
const exponential = (lnMean: number, sd: number) => {
  const value = (z: number) => Math.exp(lnMean + sd * z);
  return { mean: Math.exp(lnMean), sd: sd * Math.exp(lnMean), value, slope: (z: number) => sd * value(z) };
};

export const energyOrigin = (element: string, edge: string, { mean, sd }: EnergyOrigin): Parameter => ({
  key: `energy-origin ${element} ${edge}`,
  name: 'energy-origin',
  shell: `${element} ${edge}`,
  unit: 'eV',
  isHalfNormal: false,
  ...linear(mean, sd),
});

/** S0², with the error of the edge step: one for each spectrum. */
export const amplitude = (spectrum: number, shell: string): Parameter => ({
  key: `amplitude ${spectrum}`,
  name: 'amplitude',
  shell,
  unit: '',
  isHalfNormal: false,
  ...exponential(LN_AMPLITUDE.mean, LN_AMPLITUDE.sd),
});

export const thermalScale = (element: string, kind: PathClass): Parameter => ({
  key: `thermal-scale ${element} ${kind}`,
  name: 'thermal-scale',
  shell: CLASS_NAMES[kind],
  unit: '',
  isHalfNormal: false,
  ...exponential(0, LN_THERMAL_SD),
});

/** @param spread  factor of the prior's width by kind of sample */
export const extraStatic = (element: string, kind: PathClass, spread: number): Parameter => ({
  key: `extra-static ${element} ${kind}`,
  name: 'extra-static',
  shell: CLASS_NAMES[kind],
  unit: 'Å²',
  isHalfNormal: true,
  ...linear(0, EXTRA_STATIC * spread),
});

/** Error of the theory's phases: moves all paths of a class, each by its own standard deviation; the value is in those. */
export const classShift = (element: string, kind: PathClass): Parameter => ({
  key: `class-shift ${element} ${kind}`,
  name: 'class-shift',
  shell: CLASS_NAMES[kind],
  unit: 'sd',
  isHalfNormal: false,
  ...linear(0, 1),
});

/** @param sd  standard uncertainty of the distance, Å */
export const scattererShift = (pair: string, shell: string, shellClass: PathClass, sd: number): Parameter => ({
  key: `scatterer-shift ${pair}`,
  name: 'scatterer-shift',
  shell,
  shellClass,
  unit: 'Å',
  isHalfNormal: false,
  ...linear(0, sd),
});

/** Prior widths of the refits with free distances: relative, and Å. */
const FREE_STRETCH_SD = 0.1;
const FREE_SHIFT_SD = 0.3;

/** One common relative change of all distances. */
export const freeStretch = (): Parameter => ({
  key: 'free-stretch',
  name: 'free-stretch',
  shell: '',
  unit: '',
  isHalfNormal: false,
  ...linear(0, FREE_STRETCH_SD),
});

/** One radial shift common to all atoms of a shell class. */
export const freeShift = (element: string, kind: PathClass): Parameter => ({
  key: `free-shift ${element} ${kind}`,
  name: 'free-shift',
  shell: CLASS_NAMES[kind],
  unit: 'Å',
  isHalfNormal: false,
  ...linear(0, FREE_SHIFT_SD),
});

/** Parameters in the order they were met, each key once. */
export class ParameterList {
  readonly list: Parameter[] = [];
  private readonly indexOf = new Map<string, number>();

  /** Index of the parameter, added if its key is new. */
  add(parameter: Parameter): number {
    const known = this.indexOf.get(parameter.key);
    if (known !== undefined) return known;
    this.indexOf.set(parameter.key, this.list.length);
    this.list.push(parameter);
    return this.list.length - 1;
  }

  find(key: string): number | undefined {
    return this.indexOf.get(key);
  }
}
