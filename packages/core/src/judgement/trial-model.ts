/**
 * A trial as residuals of its parameters: which unknown moves which path by how much, and the whitened misfit of all spectra
 * together. Free distances are an option, for the refits.
 */
import { lengthSd, pathClass, radialPulls } from '../predict/unknowns.js';
import { project } from './data-vector.js';
import type { ResidualModel } from './minimise.js';
import {
  amplitude,
  classShift,
  energyOrigin,
  extraStatic,
  freeShift,
  freeStretch,
  type Parameter,
  ParameterList,
  scattererShift,
  thermalScale,
} from './parameters.js';
import { type ParameterValues, SiteTerms, type SiteUnknowns } from './site-terms.js';
import type { TrialSite, TrialSpectrum } from './trial.js';

/** Which distances are let go: none, all by one factor, or each shell class by a shift of its own. */
export type Freedom = 'none' | 'stretch' | 'classes';

export interface TrialModel extends ResidualModel {
  readonly list: readonly Parameter[];
  readonly indexOf: (key: string) => number | undefined;
  /** χ(k) of spectrum s at z, as the theory gives it, into out (nk). */
  chi(s: number, z: Float64Array, out: Float64Array): Float64Array;
}

/** @param spread  factor of the extra static disorder's prior by kind of sample */
export function trialModel(spectra: readonly TrialSpectrum[], spread: number, freedom: Freedom = 'none'): TrialModel {
  const parameters = new ParameterList();
  const sets = spectra.map((spectrum, s) => ({
    vector: spectrum.vector,
    offset: spectra.slice(0, s).reduce((sum, { vector }) => sum + vector.size, 0),
    terms: spectrum.sites.map(
      (site) => new SiteTerms(site.atOrigin, site.sigma2, site.c3, unknownsOf(parameters, spectrum, s, site, spread, freedom)),
    ),
    chi: new Float64Array(spectrum.vector.k.length),
    projected: new Float64Array(spectrum.vector.size),
  }));
  const { list } = parameters;
  const P = list.length;
  const size = sets.reduce((sum, { vector }) => sum + vector.size, 0);
  const slopes = new Float64Array(P * Math.max(...sets.map(({ vector }) => vector.k.length)));
  const values: ParameterValues & { z: Float64Array } = { z: new Float64Array(P), value: new Float64Array(P), slope: new Float64Array(P) };
  const load = (z: Float64Array): void => {
    values.z = z;
    for (let p = 0; p < P; p++) {
      values.value[p] = list[p]!.value(z[p]!);
      values.slope[p] = list[p]!.slope(z[p]!);
    }
  };
  return {
    list,
    size,
    parameters: P,
    bounded: list.map(({ isHalfNormal }) => isHalfNormal),
    indexOf: (key) => parameters.find(key),
    chi(s, z, out) {
      load(z);
      out.fill(0);
      for (const site of sets[s]!.terms) site.addTo(out, values);
      return out;
    },
    evaluate(z, residuals, jacobian) {
      load(z);
      jacobian?.fill(0);
      for (const { vector, offset, terms, chi, projected } of sets) {
        const nk = vector.k.length;
        const slope = jacobian && slopes.subarray(0, P * nk).fill(0);
        chi.fill(0);
        for (const site of terms) site.addTo(chi, values, slope);
        project(vector, chi, projected);
        for (let i = 0; i < vector.size; i++) residuals[offset + i] = vector.data[i]! - projected[i]!;
        if (!jacobian || !slope) continue;
        for (let p = 0; p < P; p++) {
          project(vector, slope.subarray(p * nk, (p + 1) * nk), projected);
          for (let i = 0; i < vector.size; i++) jacobian[p * size + offset + i] = -projected[i]!;
        }
      }
    },
  };
}

/** A start for one model where another ended: parameters both have keep their z, the others begin at what is expected. */
export function carriedOver(model: TrialModel, from: TrialModel, { z }: { readonly z: Float64Array }): Float64Array {
  return Float64Array.from(model.list, ({ key }) => {
    const known = from.indexOf(key);
    return known === undefined ? 0 : z[known]!;
  });
}

/** Registers the unknowns of one site and says how each acts on its paths. */
function unknownsOf(
  parameters: ParameterList,
  { element, edge, energyOrigin: expected }: TrialSpectrum,
  s: number,
  site: TrialSite,
  spread: number,
  freedom: Freedom,
): SiteUnknowns {
  const { signal, classes } = site;
  const { paths } = signal;
  const { atoms, label } = signal.site;
  const origin = parameters.add(energyOrigin(element, edge, expected));
  const size = parameters.add(amplitude(s, `spectrum ${s + 1}`));
  const terms = termsOf(site);
  const thermal = new Int32Array(terms.length);
  const extra = new Int32Array(terms.length);
  const start = new Int32Array(terms.length + 1);
  const shifts: { parameter: number; coefficient: number }[] = [];

  // each scatterer has the parameter of its distance, whichever of the two atoms absorbs
  const scatterers = new Map<number, number>();
  for (const { path, members } of terms) {
    if (paths[path]!.legs !== 2) continue;
    const first = members[0]![1]!;
    const sd = site.distanceSd(first);
    if (!(sd > 0)) continue;
    const { source, distance, name } = atoms[first]!;
    const pair = [atoms[0]!.source, source].sort((a, b) => a - b).join('-');
    const words = `${name} at ${distance.toFixed(2)} Å from ${label}`;
    const parameter = parameters.add(scattererShift(`${pair} ${distance.toFixed(3)}`, words, classes[first]!, sd));
    for (const [, atom] of members) scatterers.set(atom!, parameter);
  }
  const stretch = freedom === 'stretch' ? parameters.add(freeStretch()) : -1;

  terms.forEach(({ path, members }, j) => {
    const { vertices, halfLength } = paths[path]!;
    const elements = vertices.slice(1).map((vertex) => atoms[vertex]!.element);
    const kind = pathClass(vertices, classes);
    thermal[j] = parameters.add(thermalScale(element, kind));
    extra[j] = parameters.add(extraStatic(element, kind, spread));
    shifts.push({ parameter: parameters.add(classShift(element, kind)), coefficient: lengthSd(halfLength, elements) });
    if (stretch >= 0) shifts.push({ parameter: stretch, coefficient: halfLength * parameters.list[stretch]!.sd });
    // a group of alike routes moves as their mean does
    const own = new Map<number, number>();
    const move = (parameter: number, by: number): void => {
      own.set(parameter, (own.get(parameter) ?? 0) + (by * parameters.list[parameter]!.sd) / members.length);
    };
    for (const route of members) {
      for (const { atom, pull } of radialPulls(signal.site, route)) {
        if (pull === 0) continue;
        const scatterer = scatterers.get(atom);
        if (scatterer !== undefined) move(scatterer, pull);
        if (freedom === 'classes') move(parameters.add(freeShift(element, classes[atom]!)), pull);
      }
    }
    for (const [parameter, coefficient] of own) shifts.push({ parameter, coefficient });
    start[j + 1] = shifts.length;
  });
  return {
    energyOrigin: origin,
    amplitude: size,
    path: Int32Array.from(terms, ({ path }) => path),
    degeneracy: Float64Array.from(terms, ({ degeneracy }) => degeneracy),
    thermalScale: thermal,
    extraStatic: extra,
    shiftStart: start,
    shiftParameter: Int32Array.from(shifts, ({ parameter }) => parameter),
    shiftCoefficient: Float64Array.from(shifts, ({ coefficient }) => coefficient),
  };
}

interface Term {
  readonly path: number;
  readonly degeneracy: number;
  /** Routes of the path that the term stands for. */
  readonly members: readonly (readonly number[])[];
}

/**
 * Paths as they move. Single scatterers that are alike by symmetry of the crystal (one atom of the file) move together; those alike by
 * chance, or because a model was built so, are different atoms with errors of their own, and become a term each.
 */
function termsOf({ signal }: TrialSite): Term[] {
  const { atoms } = signal.site;
  return signal.paths.flatMap(({ legs, members, degeneracy }, path): Term[] => {
    if (legs !== 2) return [{ path, degeneracy, members }];
    const bySource = new Map<number, number[][]>();
    for (const route of members) {
      const { source } = atoms[route[1]!]!;
      const list = bySource.get(source);
      if (list) list.push([...route]);
      else bySource.set(source, [[...route]]);
    }
    const weightOf = (routes: readonly (readonly number[])[]): number =>
      routes.reduce((sum, route) => sum + atoms[route[1]!]!.occupancy, 0);
    const whole = weightOf(members);
    return [...bySource.values()].map((own) => ({ path, degeneracy: (degeneracy * weightOf(own)) / whole, members: own }));
  });
}
