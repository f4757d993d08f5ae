/** JSON of `ringtrue reduce` and `ringtrue dose`. */
import { z } from 'zod';
import { choice, diagnostic, edge, known, numbers, pair, program, valueAndSd } from './parts.js';

const gaps = z.array(known);
const curveRange = z.tuple([known, known]);

export const reduceSchema = z
  .strictObject({
    program,
    files: z.array(z.string()),
    k: numbers.describe('Å⁻¹, 0.05 apart'),
    chi: numbers,
    sigmaChi: gaps.describe('standard deviation of chi'),
    e0: known.describe('eV; null when chi was ready'),
    edgeStep: known,
    noise: z.strictObject({
      epsilonK: known,
      epsilonR: known,
      epsilonRHigh: known.optional(),
      epsilonRRepeats: known.optional(),
      epsilonRPoints: known.optional(),
      kMaxUseful: z.number().describe('Å⁻¹'),
      kWeight: z.number(),
      kRange: pair,
    }),
    element: z.string().optional(),
    edge: edge.optional(),
    energyEv: numbers,
    mu: numbers,
    preEdge: z.strictObject({ range: curveRange, form: z.string(), curve: gaps }),
    postEdge: z.strictObject({ range: curveRange, degree: known, curve: gaps }),
    background: z.strictObject({ rLow: known, kWeight: known, kMax: known, coefficients: known, curve: gaps }),
    scans: z.array(z.strictObject({ title: z.string(), shiftEv: valueAndSd, guess: z.string() })),
    flagged: z.array(z.looseObject({ message: z.string() })),
    choices: z.array(choice),
    warnings: z.array(diagnostic),
  })
  .describe('Result of ringtrue reduce');

export const doseSchema = z
  .strictObject({
    program,
    files: z.array(z.string()),
    edgeEnergy: z.array(z.strictObject({ scan: z.string(), value: z.number(), sd: known })).describe('eV'),
    driftPerScan: valueAndSd.describe('eV a scan; sd null for two scans'),
    detectableDrift: known,
    drift: z.boolean(),
    components: known,
    singularValues: numbers,
    chiAmplitude: z.strictObject({ values: gaps, trendPerScan: valueAndSd }),
    edgeDifference: z.number(),
    keep: z.array(z.int()),
    sentence: z.string(),
    choices: z.array(choice),
    warnings: z.array(diagnostic),
  })
  .describe('Result of ringtrue dose');
