/** JSON of `ringtrue judge`. A shift is what is to be added to the structure's distances to meet the data's. */
import { z } from 'zod';
import { diagnostic, edge, known, numbers, pair, program } from './parts.js';

const band = z.strictObject({ low95: numbers, low68: numbers, middle: numbers, high68: numbers, high95: numbers });
const complex = z.strictObject({ real: numbers, imaginary: numbers });
const valences = z.array(z.strictObject({ oxidationState: z.int(), sum: z.number(), sd: z.number() }));
const states = z.array(z.int());

const parameter = z.strictObject({
  name: z.string(),
  shell: z.string(),
  unit: z.string(),
  prior: z.strictObject({ mean: z.number(), sd: z.number() }),
  value: z.number(),
  sd: known,
  strain: z.number().describe('(value − mean)/sd of the prior'),
});

const shell = z.strictObject({
  label: z.string(),
  structureDistance: z.number().describe('Å'),
  deltaR: z.number().describe('Å; negative when the structure is too long'),
  sd: known,
  z: known,
  detectable: known.describe('Å'),
});

const comparison = z.strictObject({
  file: z.string(),
  k: numbers,
  data: numbers,
  model: numbers,
  prior: numbers,
  R: numbers,
  dataR: complex,
  modelR: complex,
  priorR: complex,
  bands: z.strictObject({ priorK: band, posteriorK: band, priorR: band, posteriorR: band }).optional(),
});

const candidate = z.strictObject({
  file: z.string(),
  title: z.string(),
  finding: z.enum(['consistent', 'consistent-under-strain', 'in-tension', 'inconsistent', 'undecided']),
  sentence: z.string(),
  x: z.number(),
  xData: z.number(),
  xPrior: z.number(),
  independentPoints: z.number(),
  p: z.number(),
  pDistances: z.number(),
  rFactor: z.number(),
  power: z.number(),
  parameters: z.array(parameter),
  strained: z.array(z.string()),
  overlength: z.strictObject({
    stretch: z.strictObject({ value: z.number(), sd: known, z: known, gain: z.number() }),
    shells: z.array(shell),
    gain: z.number(),
    freed: z.int(),
    verdict: z.enum(['overlong', 'too-short', 'none', 'not-detectable']),
    sentence: z.string(),
    detectable: known.describe('Å'),
  }),
  valence: z.array(
    z.strictObject({
      site: z.string(),
      asGiven: valences,
      rescaled: valences,
      candidates: z.strictObject({ asGiven: states, rescaled: states }),
    }),
  ),
  disorder: z.array(
    z.strictObject({
      label: z.string(),
      count: z.number(),
      meanDistance: z.number(),
      thermal: z.number(),
      static: z.number(),
      wanted: z.number(),
    }),
  ),
  rivals: z.array(
    z.strictObject({
      label: z.string(),
      kind: z.enum([
        'neighbour-removed',
        'neighbour-added',
        'light-heavy-exchange',
        'O-N-exchange',
        'metal-removed',
        'metal-metal',
        'stretch',
      ]),
      x: z.number(),
      p: z.number(),
      logEvidence: known,
      excluded: z.boolean(),
    }),
  ),
  notExcluded: z.array(z.string()),
  logEvidence: known,
  posterior: z.strictObject({ method: z.enum(['gaussian', 'sampled']), reason: z.string() }),
  comparisons: z.array(comparison),
  assumptions: z.array(z.string()),
  wouldChange: z.array(z.string()),
  cannotTell: z.array(z.string()),
  caution: z.string(),
  warnings: z.array(diagnostic),
});

export const judgeSchema = z
  .strictObject({
    program,
    evidence: z.array(
      z.strictObject({
        file: z.string(),
        absorber: z.string(),
        edge,
        temperature: z.number(),
        kRange: pair,
        rRange: pair,
        kWeight: z.number(),
        independentPoints: z.number(),
        independentPointsStern: z.number(),
        resolution: z.number(),
        epsilonK: z.number(),
        epsilonR: z.number(),
        modelError: z.number(),
      }),
    ),
    candidates: z.array(candidate).min(1),
    groups: z.array(z.strictObject({ files: z.array(z.string()), sentence: z.string() })),
    warnings: z.array(diagnostic),
    timing: z.strictObject({ prediction: z.number(), judgement: z.number(), rivals: z.number(), total: z.number() }),
  })
  .describe('Result of ringtrue judge');
