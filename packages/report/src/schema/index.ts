/** The published shapes of all JSON, as zod and as JSON Schema (draft 2020-12). For tests, scripts and documentation; no result needs it. */
import { z } from 'zod';
import { doseSchema, reduceSchema } from './evidence.js';
import { judgeSchema } from './judge.js';
import { predictSchema } from './predict.js';
import { sitesSchema } from './sites.js';

export const SCHEMAS = { predict: predictSchema, judge: judgeSchema, sites: sitesSchema, reduce: reduceSchema, dose: doseSchema } as const;

/** JSON Schema of one command's result, as text. */
export const jsonSchema = (command: keyof typeof SCHEMAS): string => `${JSON.stringify(z.toJSONSchema(SCHEMAS[command]), null, 2)}\n`;
