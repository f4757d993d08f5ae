/** Pieces that the published schemas share. Objects are closed: a field that is not described here is a fault. */
import { z } from 'zod';

/** JSON has no NaN or Infinity: what is not known is null. */
export const known = z.number().nullable();
export const numbers = z.array(z.number());
export const pair = z.tuple([z.number(), z.number()]);
export const edge = z.enum(['K', 'L1', 'L2', 'L3']);
export const program = z.strictObject({ name: z.literal('ringtrue'), version: z.string() });
export const diagnostic = z.strictObject({
  code: z.string().describe('stable, kebab-case'),
  message: z.string(),
  line: z.int().optional(),
});
export const valueAndSd = z.strictObject({ value: known, sd: known });
export const choice = z.strictObject({ what: z.string(), value: z.string(), why: z.string() });
