/** JSON of `ringtrue sites`. */
import { z } from 'zod';
import { diagnostic, known } from './parts.js';

const neighbour = z.strictObject({
  label: z.string(),
  element: z.string(),
  distance: z.number().describe('Å'),
  sd: known,
  occupancy: z.number(),
  symmetry: z.string(),
  bonded: z.boolean(),
});
const cell = z.looseObject({ a: z.number(), b: z.number(), c: z.number(), alpha: z.number(), beta: z.number(), gamma: z.number() });

export const sitesSchema = z
  .strictObject({
    structure: z.strictObject({
      file: z.string(),
      format: z.enum(['xyz', 'pdb', 'mmcif', 'cif']),
      atoms: z.int(),
      frames: z.int(),
      cell: cell.nullable(),
      spaceGroup: z.string().nullable(),
      title: z.string(),
      precision: z.strictObject({ sigma: known, method: z.string(), origin: z.string() }),
    }),
    sites: z.array(
      z.strictObject({
        label: z.string(),
        element: z.string(),
        weight: z.number(),
        variants: z.array(z.strictObject({ name: z.string(), weight: z.number(), neighbours: z.array(neighbour) })),
        neighbours: z.array(neighbour),
        coordination: z.number(),
        valence: z.array(
          z.strictObject({
            oxidationState: z.int(),
            sum: z.number(),
            sd: known,
            missing: z.array(z.string()),
            sources: z.array(z.string()),
          }),
        ),
      }),
    ),
    warnings: z.array(diagnostic),
  })
  .describe('Result of ringtrue sites');
