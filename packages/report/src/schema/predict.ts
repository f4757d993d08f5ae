/** JSON of `ringtrue predict`. Å, Å⁻¹, Å², eV, K, s. */
import { z } from 'zod';
import { diagnostic, edge, numbers, program } from './parts.js';

const part = z.strictObject({ label: z.string(), chi: numbers });
const cumulants = z.looseObject({}).describe('moments of the half path length over the frames of an ensemble, with their errors');
const thermal = z.strictObject({
  model: z.string(),
  temperature: z.number().optional().describe('K'),
  inputs: z.record(z.string(), z.union([z.string(), z.number()])),
  suggested: z.strictObject({ model: z.string(), reason: z.string() }),
});

export const predictSchema = z
  .strictObject({
    program,
    structure: z.strictObject({ file: z.string(), format: z.string(), atoms: z.int(), title: z.string() }),
    options: z.strictObject({
      absorber: z.string(),
      edge,
      temperature: z.number().describe('K'),
      debyeTemperature: z.number().optional().describe('K'),
      thermal: z.enum(['debye', 'einstein', 'springs', 'none']),
      selfEnergy: z.enum(['mean', 'hedin-lundqvist', 'dirac-hara']),
      radius: z.number().describe('longest half path length, Å'),
      maxLegs: z.int(),
      kMax: z.number().describe('Å⁻¹'),
      s02: z.number(),
      e0: z.number().describe('eV; k_theory² = k² − e0/3.81'),
      spheres: z.enum(['element', 'surroundings']),
      electricVector: z.tuple([z.number(), z.number(), z.number()]).optional(),
      pathSignals: z.boolean(),
      bands: z.boolean(),
    }),
    absorbers: z.array(
      z.strictObject({
        label: z.string(),
        element: z.string(),
        weight: z.number(),
        neighbours: z.array(z.strictObject({ label: z.string(), element: z.string(), distance: z.number().describe('Å') })),
        thermal,
      }),
    ),
    scattering: z.strictObject({
      atoms: z.array(
        z.strictObject({
          element: z.string(),
          role: z.enum(['absorber', 'scatterer']),
          muffinTinRadius: z.number().describe('bohr'),
          normanRadius: z.number().describe('bohr'),
        }),
      ),
      interstitialPotentialEv: z.number(),
      fermiLevelEv: z.number(),
      k: numbers.describe('Å⁻¹'),
      meanFreePath: numbers.describe('Å'),
    }),
    k: numbers.describe('Å⁻¹, 0.05 apart'),
    chi: numbers.describe('χ on that grid'),
    paths: z.array(
      z.strictObject({
        label: z.string(),
        legs: z.int(),
        degeneracy: z.number(),
        halfLength: z.number().describe('Å'),
        atoms: z.array(z.string()),
        sigma2: z.strictObject({ thermal: z.number(), static: z.number(), from: z.string() }).describe('Å²'),
        cumulants: cumulants.optional(),
        share: z.number().describe('part of ∫|k³χ|; those of all paths sum to 1'),
        k: numbers.optional(),
        amplitude: numbers.optional().describe('|f_eff|, Å'),
        phase: numbers.optional().describe('rad'),
      }),
    ),
    shells: z.array(
      z.strictObject({
        label: z.string(),
        element: z.string(),
        count: z.number(),
        meanDistance: z.number().describe('Å'),
        sigma2: z.strictObject({ thermal: z.number(), static: z.number(), total: z.number() }).describe('Å²'),
        thirdCumulant: z.number().describe('Å³'),
        hiddenByOneShell: z.number(),
        bFactorBound: z.number().optional().describe('Å²'),
        share: z.number(),
      }),
    ),
    bands: z.strictObject({ k: numbers, low95: numbers, low68: numbers, high68: numbers, high95: numbers }).optional(),
    contributions: z.strictObject({ byShell: z.array(part), byOrder: z.array(part) }).optional(),
    ensemble: z.looseObject({ frames: z.int() }).optional(),
    transform: z.strictObject({
      R: numbers.describe('Å, not phase-corrected'),
      real: numbers,
      imaginary: numbers,
      window: z.strictObject({ name: z.string(), kMin: z.number(), kMax: z.number(), sill: z.number(), kWeight: z.number() }),
    }),
    neglected: z.number().describe('bound on the share of the paths left out'),
    warnings: z.array(diagnostic),
    timing: z
      .strictObject({ atoms: z.number(), potentials: z.number(), phases: z.number(), paths: z.number(), total: z.number() })
      .describe('s'),
  })
  .describe('Result of ringtrue predict');
