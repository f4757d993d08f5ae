/** Invented results for the tests of the figures: round numbers and simple waves, no measurement. */
import type {
  CandidateJudgement,
  Comparison,
  DisorderRow,
  DoseReport,
  EvidenceSummary,
  FittedParameter,
  Overlength,
  Prediction,
  Reduction,
} from '@ringtrue/core';
import type { SiteDrawing } from './site-drawing.js';

const grid = (from: number, to: number, step: number): Float64Array =>
  Float64Array.from({ length: Math.round((to - from) / step) + 1 }, (_, i) => from + i * step);
const wave = (k: Float64Array, n: number, r: number, s: number): Float64Array =>
  k.map((x) => (x > 0 ? (n / (x * r * r)) * Math.exp(-2 * s * x * x) * Math.sin(2 * x * r) : 0));
const plus = (...parts: Float64Array[]): Float64Array => parts[0]!.map((_, i) => parts.reduce((sum, part) => sum + part[i]!, 0));
const times = (y: Float64Array, factor: number): Float64Array => y.map((value) => value * factor);
const peak = (R: Float64Array, at: number, height: number): Float64Array => R.map((r) => height * Math.exp(-((r - at) ** 2) / 0.08));

const k = grid(0, 12, 0.2);
const parts = [wave(k, 4, 1.9, 0.003), wave(k, 1, 2.7, 0.002), wave(k, 2, 3.3, 0.006)];
const chi = plus(...parts);
const R = grid(0, 8, 0.1);
const zero = R.map(() => 0);

export const PREDICTION: Prediction = {
  program: { name: 'ringtrue', version: '0' },
  structure: { file: 'a<b>.cif', format: 'cif', atoms: 3, title: '' },
  options: {
    absorber: 'Mn',
    edge: 'K',
    temperature: 15,
    thermal: 'debye',
    selfEnergy: 'mean',
    spheres: 'element',
    radius: 5,
    maxLegs: 4,
    kMax: 12,
    s02: 0.82,
    e0: 0,
    pathSignals: false,
    bands: true,
  },
  absorbers: [],
  scattering: { atoms: [], interstitialPotentialEv: 0, fermiLevelEv: 0, k, meanFreePath: k },
  k,
  chi,
  paths: [],
  shells: [],
  bands: { k, low95: times(chi, 0.6), low68: times(chi, 0.8), high68: times(chi, 1.2), high95: times(chi, 1.4) },
  contributions: {
    byShell: ['Mn–O 1.90 Å', 'Mn–Mn 2.70 Å', 'multiple scattering'].map((label, i) => ({ label, chi: parts[i]! })),
    byOrder: ['single scattering', '3 legs'].map((label, i) => ({ label, chi: i === 0 ? plus(parts[0]!, parts[1]!) : parts[2]! })),
  },
  transform: { R, real: peak(R, 1.5, 3), imaginary: zero, window: { name: 'hann', kMin: 3, kMax: 12, sill: 1, kWeight: 3 } },
  neglected: 0,
  warnings: [],
  timing: { atoms: 0, potentials: 0, phases: 0, paths: 0, total: 0 },
};

const band = (y: Float64Array, half: number) => ({
  low95: times(y, 1 - 2 * half),
  low68: times(y, 1 - half),
  middle: y,
  high68: times(y, 1 + half),
  high95: times(y, 1 + 2 * half),
});
const model = times(chi, 0.95);
const [dataR, modelR, priorR] = [peak(R, 1.5, 3), peak(R, 1.52, 2.9), peak(R, 1.6, 2.7)] as [Float64Array, Float64Array, Float64Array];
export const COMPARISON: Comparison = {
  file: 'scan.xdi',
  k,
  data: chi,
  model,
  prior: times(chi, 0.9),
  R,
  dataR: { real: dataR, imaginary: zero },
  modelR: { real: modelR, imaginary: zero },
  priorR: { real: priorR, imaginary: zero },
  bands: { priorK: band(chi, 0.2), posteriorK: band(model, 0.05), priorR: band(priorR, 0.2), posteriorR: band(modelR, 0.05) },
};
export const EVIDENCE: Pick<EvidenceSummary, 'kRange' | 'rRange' | 'kWeight'> = { kRange: [3, 11], rRange: [1, 4], kWeight: 3 };

const unknown = (name: string, shell: string, strain: number): FittedParameter => ({
  name,
  shell,
  unit: '',
  prior: { mean: 0, sd: 2 },
  value: 2 * strain,
  sd: 0.8,
  strain,
});
export const PARAMETERS: FittedParameter[] = [
  unknown('energy-origin', 'Mn K', -0.4),
  unknown('thermal-scale', 'first shell', 2.6),
  unknown('scatterer-shift', 'O1 of Mn1', 0.2),
  unknown('scatterer-shift', 'O2 of Mn1', -1.4),
];
export const OVERLENGTH: Pick<Overlength, 'shells'> = {
  shells: [
    { label: 'Mn–O first shell', structureDistance: 2.08, deltaR: -0.081, sd: 0.019, z: -4.3, detectable: 0.05 },
    { label: 'Mn–Mn', structureDistance: 2.82, deltaR: 0.01, sd: 0.03, z: 0.3, detectable: 0.09 },
  ],
};
export const DISORDER: DisorderRow[] = [
  { label: 'Mn–O 1.90 Å', count: 4, meanDistance: 1.9, thermal: 0.003, static: 0.001, wanted: 0.005 },
  { label: 'Mn–C 4.90 Å', count: 1.5, meanDistance: 4.9, thermal: 0.2, static: 0, wanted: 0.21 },
];
const candidate = (file: string, finding: CandidateJudgement['finding'], logEvidence: number): CandidateJudgement =>
  ({ file, finding, logEvidence }) as CandidateJudgement;
export const CANDIDATES: CandidateJudgement[] = [
  candidate('wrong.xyz', 'inconsistent', -40),
  candidate('right.cif', 'consistent', -10),
  candidate('rival.xyz', 'in-tension', -11),
];

const energyEv = grid(6350, 7100, 10);
export const REDUCTION: Reduction = {
  k,
  chi,
  sigmaChi: k.map((x) => 0.0005 * x),
  e0: 6550,
  edgeStep: 1,
  noise: { kMaxUseful: 11 } as Reduction['noise'],
  element: 'Mn',
  edge: 'K',
  energyEv,
  mu: energyEv.map((e) => (e < 6550 ? 0.1 : 1.1 + 0.05 * Math.sin((e - 6550) / 30))),
  preEdge: { range: [-150, -30], form: 'line', curve: energyEv.map(() => 0.1) },
  postEdge: { range: [100, 550], degree: 2, curve: energyEv.map(() => 1.1) },
  background: { rLow: 1, kWeight: 2, kMax: 12, coefficients: 8, curve: energyEv.map((e) => 1.1 + 0.00002 * (e - 6550)) },
  scans: [],
  flagged: [],
  choices: [],
  warnings: [],
};
export const DOSE = {
  edgeEnergy: [0.2, 0.05, -0.1, -0.2].map((value, s) => ({ scan: `s${s}`, value: 6550 + value, sd: 0.03 })),
  driftPerScan: { value: -0.135, sd: 0.01 },
  chiAmplitude: { values: [1.02, 1, 0.99, 0.98], trendPerScan: { value: -0.013, sd: 0.004 } },
  keep: [1],
} as unknown as DoseReport;

const atom = (element: string, x: number, y: number, z: number, share?: number): SiteDrawing['atoms'][number] => ({
  element,
  label: `${element}${x}`,
  position: [x, y, z],
  isNeighbour: share !== undefined,
  ...(share === undefined ? {} : { share }),
});
export const SITE: SiteDrawing = {
  absorber: { element: 'Mn', label: 'Mn1', position: [0, 0, 0], isNeighbour: false },
  atoms: [
    atom('O', 1.9, 0, 0, 0.1),
    atom('O', -1.88, 0.1, 0, 0.1),
    atom('N', 0, 2.1, 0.1, 0.07),
    atom('O', 0, -1.95, -0.2, 0.09),
    atom('O', 0.1, 0, 2.2, 0.04),
    atom('C', 2.9, 0.8, 0),
  ],
  bonds: [
    [-1, 0],
    [-1, 1],
    [-1, 2],
    [-1, 3],
    [-1, 4],
    [0, 5],
  ],
  caption: 'invented site',
};
