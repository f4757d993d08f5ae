/**
 * Raw absorption as a beamline would record it, from a true χ(k): smooth absorption of the other shells, an edge with its peaks, a
 * background that is no straight line, counts with noise. eV, Å⁻¹.
 */
import { elementBySymbol, shellAttenuation } from '../../packages/core/src/elements/index.js';
import { writeXdi } from '../../packages/core/src/evidence/index.js';
import { energyEvFromK, K_STEP, kFromEnergyEv } from '../../packages/core/src/spectrum/index.js';

export interface TrueSpectrum {
  readonly element: string;
  /** Middle of the rise, eV. */
  readonly edgeEv: number;
  /** Theory's k = 0 above the middle of the rise, eV. */
  readonly offsetEv: number;
  readonly s02: number;
  /** 0 … by 0.05 Å⁻¹, S0² = 1. */
  readonly chi: Float64Array;
}

/** Below this the theory is no description of the edge; faded in over 1 Å⁻¹. */
const FADE_IN = 1.8;

function chiAt({ chi }: TrueSpectrum, k: number): number {
  if (k <= FADE_IN) return 0;
  const x = Math.min(k / K_STEP, chi.length - 1.001);
  const j = Math.floor(x);
  // Cubic through four points: the straight line would damp the farthest shells by a per cent.
  const t = x - j;
  const [a, b, c, d] = [chi[Math.max(0, j - 1)]!, chi[j]!, chi[j + 1]!, chi[Math.min(chi.length - 1, j + 2)]!];
  const value = b + 0.5 * t * (c - a + t * (2 * a - 5 * b + 4 * c - d + t * (3 * (b - c) + d - a)));
  const fade = Math.min(1, k - FADE_IN);
  return value * fade * fade * (3 - 2 * fade);
}

/** Absorption of the shell alone in units of its step: 0 below, the rise, its peaks, then 1 + χ falling as the atom does. */
function shellAbsorption(spectrum: TrueSpectrum, energyEv: number): number {
  const { element, edgeEv, offsetEv, s02 } = spectrum;
  const shell = shellAttenuation(elementBySymbol(element).Z, 'K');
  const e = energyEv - edgeEv;
  const bump = (at: number, height: number, width: number) => height * Math.exp(-(((e - at) / width) ** 2));
  const decay = e > 0 ? shell.at(shell.energyEv + e) / shell.at(shell.energyEv) : 1;
  const rise = 0.5 + Math.atan(e / 1.4) / Math.PI;
  const k = kFromEnergyEv(e - offsetEv);
  // A background of the atom itself and of everything else in the beam: slow enough to lie below 0.6 Å.
  const slow = k > 0 ? 0.012 * Math.sin(0.9 * k + 1) * Math.exp(-k / 8) : 0;
  return decay * rise * (1 + slow + s02 * chiAt(spectrum, k)) + bump(-11, 0.035, 1.6) + bump(4.5, 0.3, 3.2) + bump(19, 0.05, 8);
}

/** eV relative to the edge. */
function energies(kMax: number): number[] {
  const list: number[] = [];
  for (let e = -200; e < -30; e += 10) list.push(e);
  for (let e = -30; e < -14; e += 2) list.push(e);
  for (let i = 0; i < 135; i++) list.push(-14 + 0.4 * i);
  for (let k = 3.25; k <= kMax + 1e-9; k += K_STEP) list.push(energyEvFromK(k));
  return list;
}

export interface ScanSettings {
  readonly detection: 'transmission' | 'fluorescence';
  /** Å⁻¹ */
  readonly kMax: number;
  /** Standard deviation of a point, part of the edge step; half as much again at the end. */
  readonly noise: number;
  /** Part of the sample that is `other`. */
  readonly mixture?: { readonly other: TrueSpectrum; readonly part: number };
}

export interface Scan {
  readonly energyEv: Float64Array;
  readonly i0: Float64Array;
  readonly signal: Float64Array;
}

export function scan(spectrum: TrueSpectrum, { detection, kMax, noise, mixture }: ScanSettings, normal: () => number): Scan {
  const relative = energies(kMax);
  const energyEv = Float64Array.from(relative, (e) => Math.round(100 * (spectrum.edgeEv + e)) / 100);
  const i0 = new Float64Array(energyEv.length);
  const signal = new Float64Array(energyEv.length);
  const beam = 1.1e6 * (1 + 0.03 * normal());
  for (let i = 0; i < energyEv.length; i++) {
    const e = energyEv[i]!;
    let mu = shellAbsorption(spectrum, e);
    if (mixture) mu += mixture.part * (shellAbsorption(mixture.other, e) - mu);
    mu += noise * (1 + (0.5 * i) / energyEv.length) * normal();
    const x = (e - spectrum.edgeEv) / 1000;
    i0[i] = Math.round(beam * (1 - 0.06 * x - 0.02 * (i / energyEv.length)) * (1 + 0.003 * Math.sin(i / 37)));
    signal[i] =
      detection === 'fluorescence'
        ? Math.round(0.25 * i0[i]! * (0.35 - 0.08 * x + mu)) // elastic and Compton scattering fall slowly
        : Math.round(i0[i]! * Math.exp(-(0.9 * mu + 0.6 * (1 + x / 6.5) ** -2.8)));
  }
  return { energyEv, i0, signal };
}

const SIGNAL = { fluorescence: 'ifluor', transmission: 'itrans' } as const;

export function asXdi(taken: Scan, detection: ScanSettings['detection'], element: string, comments: readonly string[]): string {
  return writeXdi({
    applications: ['Invented/1.0'],
    fields: [
      ['Element.symbol', element],
      ['Element.edge', 'K'],
      ['Facility.name', 'invented'],
      ['Facility.xray_source', 'invented'],
      ['Beamline.name', 'invented'],
      ['Mono.d_spacing', '3.13557'],
      ['Sample.temperature', '15 K'],
    ],
    comments,
    table: {
      names: ['energy', 'i0', SIGNAL[detection]],
      units: ['eV', 'counts', 'counts'],
      columns: [taken.energyEv, taken.i0, taken.signal],
    },
  });
}

export function asColumns(taken: Scan, detection: ScanSettings['detection'], comments: readonly string[]): string {
  const rows = Array.from(taken.energyEv, (e, i) => `${e.toFixed(2)}  ${taken.i0[i]}  ${taken.signal[i]}`);
  return `${[...comments.map((text) => `# ${text}`), `# energy_eV  i0  ${SIGNAL[detection]}`, ...rows].join('\n')}\n`;
}

/** χ(k) as somebody else extracted it: the truth against the middle of the edge, with noise, from 2 Å⁻¹. */
export function asChi(spectrum: TrueSpectrum, kMax: number, noise: number, normal: () => number, comments: readonly string[]): string {
  const rows: string[] = [];
  for (let i = Math.round(2 / K_STEP); i * K_STEP <= kMax + 1e-9; i++) {
    const k = i * K_STEP;
    const value = spectrum.s02 * chiAt(spectrum, Math.sqrt(k * k - spectrum.offsetEv / energyEvFromK(1)));
    rows.push(`${k.toFixed(2)}  ${(value + noise * normal()).toFixed(6)}`);
  }
  return `${[...comments.map((text) => `# ${text}`), '# k  chi', ...rows].join('\n')}\n`;
}
